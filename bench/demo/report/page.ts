import type { Engine, Region, ResultRaster } from "../../../src/index.js";
import type { Agreement } from "../agreement.js";
import { duration } from "../figures.js";
import type { Machine } from "../machine.js";
import { verdictOf, type Outcome } from "../measure.js";
import { timeChart } from "./chart.js";
import { cropPlaces } from "./cropPlaces.js";
import { jobSection } from "./jobSection.js";
import { escaped } from "./markup.js";
import { cropped, picture, reduced } from "./pictures.js";
import { style } from "./style.js";

/** All that the report tells. */
export interface Findings {
  image: ResultRaster;
  /** What the image is, in words. */
  imageName: string;
  outcomes: { outcome: Outcome; agreements: Agreement[]; aside?: string }[];
  machine: Machine;
  /** Rectangles to look at closely; the most detailed ones where absent. */
  places?: Region[];
}

/** One self-contained page: everything it shows is inside it. */
export function reportPage(engine: Engine, findings: Findings): string {
  const places = findings.places ?? cropPlaces(findings.image);
  const outcomes = findings.outcomes.map(({ outcome }) => outcome);
  const sections = findings.outcomes.map(({ outcome, agreements, aside }) =>
    jobSection(outcome, agreements, cropPairs(findings.image, outcome, places), aside),
  );
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>tapwise: three filters over one sheet</title>
<style>${style}</style>
</head>
<body>
<header class="page">
<h1>Three filters over one sheet</h1>
<p class="lead">${escaped(findings.imageName)} is sharpened, softened and blurred. The engine chose a method for each by predicted time; then every method that applies was run and timed.</p>
</header>
<main>
<section aria-label="Summary"><div class="glance">
${overview(engine, findings.image, findings.imageName, places)}
<div>${summary(outcomes)}</div>
</div></section>
<section id="times">
<h2>Predicted against measured</h2>
<p>Time of one run, on a logarithmic scale. The line between the two is how far the prediction was off; what counts is that the order is right.</p>
<ul class="legend"><li class="mark" style="--key:var(--predicted)">predicted</li><li style="--key:var(--chosen)">measured, the chosen method</li><li style="--key:var(--other)">measured, the others</li></ul>
${timeChart(outcomes)}
</section>
${sections.join("\n")}
<section id="machine">
<h2>Measured on</h2>
${machineList(findings)}
</section>
</main>
<footer>Medians of runs taken in turns, on prepared filters. Written by <code>npm run demo</code>; times on another machine, or on this one when it is busy, will differ.</footer>
</body>
</html>
`;
}

function overview(engine: Engine, image: ResultRaster, name: string, places: readonly Region[]): string {
  const smaller = reduced(engine, image, 560);
  const inDrawing = (units: number): number => Math.round((units * 560) / image.width);
  const marks = places.map((place, index) => {
    const [x, y] = [inDrawing(place.x), inDrawing(place.y)];
    const frame = `<rect x="${x}" y="${y}" width="${inDrawing(place.width)}" height="${inDrawing(place.height)}"/>`;
    return `${frame}<rect class="tag" x="${x}" y="${y}" width="18" height="18"/><text x="${x + 9}" y="${y + 14}">${index + 1}</text>`;
  });
  const overlay = `<svg viewBox="0 0 560 ${inDrawing(image.height)}" aria-hidden="true">${marks.join("")}</svg>`;
  const alt = `${name}: the whole image`;
  return `<figure><div class="overview">${picture(smaller, alt, "whole")}${overlay}</div><figcaption>${image.width} × ${image.height}, here made smaller; the numbered parts are shown at 1:1 below.</figcaption></figure>`;
}

/** For each job a few lines: the method, its times, what the choice cost. */
function summary(outcomes: readonly Outcome[]): string {
  return outcomes
    .map((outcome) => {
      const { job, explanation } = outcome;
      const chosen = outcome.methods.find(({ candidate }) => candidate.method === explanation.method);
      return `<div class="short"><h2><a href="#${job.file}">${escaped(job.title)}</a></h2>
<p><b class="method">${explanation.method}</b> for ${escaped(job.kernelName)}</p>
<p>${duration(explanation.milliseconds)} predicted, <b>${duration(chosen?.timing?.median ?? NaN)}</b> measured, ${verdictOf(outcome)}</p></div>`;
    })
    .join("\n");
}

function cropPairs(image: ResultRaster, outcome: Outcome, places: readonly Region[]): string {
  return places
    .map((place, index) => {
      const where = `part ${index + 1}, ${place.width} × ${place.height} at column ${place.x}, row ${place.y}`;
      const before = picture(cropped(image, place), `Before: ${where}`, "crop");
      const after = picture(cropped(outcome.result, place), `After “${outcome.job.title}”: ${where}`, "crop");
      return `<div class="pair"><figure>${before}<figcaption>Part ${index + 1}, before</figcaption></figure><figure>${after}<figcaption>Part ${index + 1}, after</figcaption></figure></div>`;
    })
    .join("\n");
}

function machineList({ machine, outcomes, image }: Findings): string {
  const { explanation, layout } = outcomes[0].outcome;
  const facts: [string, string][] = [
    ["Processor", machine.processor],
    ["Runtime", machine.runtime],
    ["Engine", `tapwise ${machine.packageVersion}, build ${explanation.build}, one thread`],
    ["Predictions", explanation.profile],
    ["Image", `${image.width} × ${image.height}, ${layout.channels} channels of ${layout.sample}`],
    ["Date", machine.date],
  ];
  return `<dl>${facts.map(([term, text]) => `<dt>${term}</dt><dd>${escaped(text)}</dd>`).join("")}</dl>${machine.busy === undefined ? "" : `<p>${escaped(machine.busy)}</p>`}`;
}
