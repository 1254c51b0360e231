import type { HardwareProfile } from "../index.js";
import type { Crossover } from "../measure/types.js";
import { crossoverChart } from "./chart.js";
import { chartStyle } from "./chart/colours.js";
import { dateInWords, threadsInWords } from "./figures.js";
import { borderInWords, kernelsInWords, layoutInWords } from "./layoutWords.js";
import { capitalised } from "./methodNames.js";
import { escaped, facts, list, paragraph } from "./page/markup.js";
import { profileSection } from "./page/profileSection.js";
import { sizeTable } from "./page/sizeTable.js";
import { reportStyle } from "./page/style.js";
import { answerOf, otherCrossingSentences, regretSentence, subjectSentence } from "./sentences.js";

/** What a report tells. */
export interface Findings {
  crossover: Crossover;
  /** The profile that predicted. */
  profile: HardwareProfile;
  /** Makes the chart's elements: a page's, or `nodeDocument()`. */
  document: Document;
  /** An earlier crossover to compare with. @defaultValue none */
  earlier?: Crossover;
}

/** A page may show its own style, and nothing that comes from elsewhere or acts. */
const policy = "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; form-action 'none'";

/** Three drawings, of which the style shows the one that fits. */
const widths = { narrow: 340, medium: 660, wide: 1040 } as const;

const tableHint =
  "Measured times are medians, the fastest in bold, with the middle half of the times below. Regret is how much longer the method that the engine would choose takes than the fastest one; 0 % where the two are nearer than the noise.";

/**
 * The findings as one HTML file that needs nothing else: no script, no fonts, no network.
 *
 * Every string of the findings, whoever wrote it, appears as text.
 */
export function reportHtml({ crossover, profile, document, earlier }: Findings): string {
  const drawn = Object.entries(widths).map(([kind, width]) => {
    const chart = crossoverChart(crossover, { document, width, ...(earlier === undefined ? {} : { earlier }) });
    return `<div class="${kind}">${chart.outerHTML}</div>`;
  });
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${policy}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="color-scheme" content="light dark">
<title>${escaped(`Time against kernel size on ${crossover.host}`)}</title>
<style>${reportStyle}${chartStyle}</style>
</head>
<body>
<header>
<h1>${escaped(`Which method is fastest on ${crossover.host}?`)}</h1>
${answer(crossover)}
${paragraph(subjectSentence(crossover), "subject")}
</header>
<main>
<section aria-labelledby="chart">
<h2 id="chart">Time against kernel size</h2>
<figure>${drawn.join("")}</figure>
${otherCrossings(crossover)}
${howToRead(earlier)}
</section>
<section aria-labelledby="sizes">
<h2 id="sizes">Every size that was measured</h2>
${paragraph(regretSentence(crossover))}
${paragraph(tableHint, "aside")}
${sizeTable(crossover)}
</section>
<section aria-labelledby="machine">
<h2 id="machine">Measured on</h2>
${facts(machineFacts(crossover))}
${crossover.notes.length === 0 ? "" : list(crossover.notes)}
</section>
${profileSection(profile)}
</main>
<footer>Written by tapwise. Times on another machine, in another browser, or here when it is busy, will differ.</footer>
</body>
</html>
`;
}

function answer(crossover: Crossover): string {
  const { answer, certainty } = answerOf(crossover);
  return `${paragraph(`${answer}.`, "answer")}${certainty === "" ? "" : paragraph(`${capitalised(certainty)}.`, "certainty")}`;
}

function otherCrossings(crossover: Crossover): string {
  const sentences = otherCrossingSentences(crossover);
  return sentences.length > 1 ? list(sentences) : sentences.map((sentence) => paragraph(sentence)).join("");
}

function howToRead(earlier: Crossover | undefined): string {
  const hints = [
    "Lower is faster. Each step of the grid to the right doubles the side of the kernel, about; upwards each step is a fixed factor in time.",
    "A solid line with marks is what was measured, each mark the median of many runs, with the middle half of them shaded; the dashed line of the same colour is what the profile predicted.",
    "A ring is a crossing: to its left one method is faster, to its right the other. The shaded strip, or the bar through the ring, is where it surely lies: at its left end the first method was still faster beyond the noise, at its right end the second one already.",
    ...(earlier === undefined ? [] : [`Thin grey lines are an earlier measurement: ${earlier.host}, ${dateInWords(earlier.date)}.`]),
  ];
  return `<h3>How to read it</h3>\n${list(hints)}`;
}

function machineFacts({ host, build, threads, date, layout, separable, border, profile, rows }: Crossover): [string, string][] {
  return [
    ["Host", host],
    ["Engine", `${build} build, ${threadsInWords(threads)}`],
    ["Date", dateInWords(date)],
    ["Images", layoutInWords(layout)],
    ["Kernels", kernelsInWords(separable)],
    ["Border", borderInWords(border)],
    ["Times taken", `${rows.reduce((sum, { samples }) => sum + samples, 0)} at ${rows.length} kernel sizes`],
    ["Predicted by", profile],
  ];
}
