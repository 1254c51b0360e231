import type { Agreement } from "../agreement.js";
import { byteCount, duration, percent, small } from "../figures.js";
import type { Outcome } from "../measure.js";
import { kernelFigure } from "./kernelPicture.js";
import { escaped, table, type Cell } from "./markup.js";

/** One job: why that method, the kernel, crops before and after, times of every method, how far the methods differ. */
export function jobSection(outcome: Outcome, agreements: readonly Agreement[], pairs: string, aside?: string): string {
  const { job, explanation } = outcome;
  return `<section id="${job.file}">
<div class="job"><div>
<h2>${escaped(job.title)}</h2>
<p>${escaped(job.purpose)}</p>
<p class="because">${chosenAndWhy(explanation)} <small>In ${escaped(explanation.arithmetic)}.</small></p>
${aside === undefined ? "" : `<p>${escaped(aside)}</p>`}
${timeTable(outcome)}
${agreementTable(job.file, agreements)}
</div>${kernelFigure(job.kernel, job.kernelName)}</div>
<h3>Before and after, at 1:1</h3>
<div class="pairs">${pairs}</div>
</section>`;
}

/** The engine's reason, with the method's name in bold where the sentence begins with it, else before it. */
function chosenAndWhy({ method, because }: Outcome["explanation"]): string {
  const reason = because.startsWith(method) ? because.slice(method.length) : `: ${because}`;
  return `Chosen: <b>${method}</b>${escaped(reason)}`;
}

function timeTable({ job, explanation, methods }: Outcome): string {
  const rows = methods.flatMap(({ candidate, timing }): Cell[][] => {
    if (timing === undefined) return [];
    const predicted = candidate.milliseconds ?? NaN;
    return [
      [
        { heading: candidate.method === explanation.method ? `<b class="chosen">${candidate.method}</b>` : candidate.method },
        { figure: duration(predicted) },
        { figure: duration(timing.median) },
        { figure: percent(timing.median / predicted - 1) },
        { figure: `${duration(timing.shortest)} – ${duration(timing.longest)}, ${timing.runs} runs` },
        { figure: byteCount(candidate.bytes ?? 0) },
      ],
    ];
  });
  const bands = methods.flatMap(({ timing }) =>
    timing?.rowsMeasured === undefined
      ? []
      : [`<p class="title">${timing.method} was timed over the first ${timing.rowsMeasured} rows; its times are for all rows, in proportion.</p>`],
  );
  const refused = methods.flatMap(({ candidate, timing }) =>
    timing === undefined ? [`<li><b>${candidate.method}</b>: ${escaped(candidate.refused ?? "")}</li>`] : [],
  );
  const refusals = refused.length === 0 ? "" : `<p class="title">What does not apply, and why</p><ul class="refused">${refused.join("")}</ul>`;
  return (
    table(
      `${job.file}-times`,
      "One run over the whole image, by every method that applies",
      ["Method", "Predicted", "Measured", "Off by", "Shortest – longest", "Memory"],
      rows,
    ) +
    bands.join("") +
    refusals
  );
}

function agreementTable(file: string, agreements: readonly Agreement[]): string {
  if (agreements.length === 0) return "<p>One method applies, so there is nothing to compare it with.</p>";
  const colours = agreements[0].premultiplied ? "; colours times their alpha" : "";
  const rows = agreements.map(({ methods, written, unrounded, holds }): Cell[] => [
    { heading: methods.join(" – ") },
    { figure: `${small(written.largest)} of ${small(written.allowed)}` },
    { figure: `${small(unrounded.largest)} of ${small(unrounded.allowed)}` },
    { figure: holds ? "kept" : "<strong>broken</strong>" },
  ]);
  return table(
    `${file}-agreement`,
    `Largest difference between two methods, in levels, of what their error bounds allow${colours}`,
    ["Methods", "As written", "Before rounding", "Bounds"],
    rows,
  );
}
