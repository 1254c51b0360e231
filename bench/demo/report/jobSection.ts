import type { Agreement } from "../agreement.js";
import { byteCount, duration, percent, small } from "../figures.js";
import type { Outcome } from "../measure.js";
import { kernelFigure } from "./kernelPicture.js";
import { escaped, table, type Cell } from "./markup.js";

/** One job: why that method, the kernel, crops before and after, times of every method, how far the methods differ. */
export function jobSection(outcome: Outcome, agreements: readonly Agreement[], pairs: string): string {
  const { job, explanation } = outcome;
  const terms = explanation.terms === undefined ? "" : `, ${explanation.terms} ${explanation.terms === 1 ? "term" : "terms"}`;
  return `<section id="${job.file}">
<div class="job"><div>
<h2>${escaped(job.title)}</h2>
<p>${escaped(job.purpose)}</p>
<p class="because">Chosen: <b>${explanation.method}</b>${terms} (${escaped(explanation.arithmetic)}). ${escaped(explanation.because)}</p>
${timeTable(outcome)}
${agreementTable(agreements)}
</div>${kernelFigure(job.kernel, job.kernelName)}</div>
<h3>Before and after, at 1:1</h3>
<div class="pairs">${pairs}</div>
</section>`;
}

function timeTable(outcome: Outcome): string {
  const rows = outcome.methods.map(({ candidate, timing }): Cell[] => {
    const chosen = candidate.method === outcome.explanation.method;
    const heading = { heading: chosen ? `<b class="chosen">${candidate.method}</b>` : candidate.method };
    if (timing === undefined) return [heading, `<span class="refused">${escaped(candidate.refused ?? "")}</span>`, "", "", "", ""];
    const predicted = candidate.milliseconds ?? NaN;
    const band = timing.rowsMeasured === undefined ? "" : `, from ${timing.rowsMeasured} rows`;
    return [
      heading,
      { figure: duration(predicted) },
      { figure: duration(timing.median) },
      { figure: percent(timing.median / predicted - 1) },
      { figure: `${duration(timing.shortest)} – ${duration(timing.longest)}, ${timing.runs}×${band}` },
      { figure: byteCount(candidate.bytes ?? 0) },
    ];
  });
  return spanRefusals(table("One run over the whole sheet, by every method", ["Method", "Predicted", "Measured", "Off by", "Shortest – longest, runs", "Memory"], rows));
}

/** A refusal is a sentence: it takes the room of the five figures. */
function spanRefusals(html: string): string {
  return html.replaceAll(/<td>(<span class="refused">[^\n]*?<\/span>)<\/td>(<td><\/td>)+/g, '<td colspan="5">$1</td>');
}

function agreementTable(agreements: readonly Agreement[]): string {
  if (agreements.length === 0) return "<p>One method applies, so there is nothing to compare it with.</p>";
  const rows = agreements.map(({ methods, written, unrounded, holds }): Cell[] => [
    { heading: methods.join(" – ") },
    { figure: `${small(written.largest)} of ${small(written.allowed)}` },
    { figure: `${small(unrounded.largest)} of ${small(unrounded.allowed)}` },
    holds ? "within" : "<strong>beyond</strong>",
  ]);
  return table("Largest difference between two methods, in levels, of what their error bounds allow", ["Methods", "As written", "Before rounding", "Bounds"], rows);
}
