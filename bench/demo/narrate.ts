import type { Agreement } from "./agreement.js";
import { duration, percent, small } from "./figures.js";
import { verdictOf, type Outcome } from "./measure.js";

/** One job as lines for the terminal. */
export function narrate(outcome: Outcome, agreements: readonly Agreement[], aside?: string): string {
  const { job, explanation } = outcome;
  const surprise = explanation.method === job.madeFor ? "" : `\n  The job is made for ${job.madeFor}; here the engine saw it otherwise.`;
  return [
    `${job.title}: ${job.kernelName}, ${job.kernel.width} × ${job.kernel.height} taps`,
    `  Chosen: ${explanation.because}${surprise}`,
    ...outcome.methods.map(methodLine(explanation.method)),
    `  The choice was ${verdictOf(outcome)}.`,
    ...agreements.map(agreementLine),
    ...(aside === undefined ? [] : [`  ${aside}`]),
    "",
  ].join("\n");
}

function methodLine(chosen: string): (entry: Outcome["methods"][number]) => string {
  return ({ candidate, timing }) => {
    const name = `${candidate.method === chosen ? "›" : " "} ${candidate.method.padEnd(12)}`;
    if (timing === undefined) return `  ${name}${candidate.refused ?? ""}`;
    const predicted = candidate.milliseconds ?? NaN;
    const band = timing.rowsMeasured === undefined ? "" : `, in proportion from ${timing.rowsMeasured} rows`;
    const spread = `${duration(timing.shortest)} to ${duration(timing.longest)}, ${timing.runs} runs${band}`;
    return `  ${name}predicted ${duration(predicted).padStart(8)}   measured ${duration(timing.median).padStart(8)}  ${percent(timing.median / predicted - 1).padStart(6)}   (${spread})`;
  };
}

function agreementLine({ methods, written, unrounded, premultiplied, holds }: Agreement): string {
  const verdict = holds ? "agree within their bounds" : "DIFFER BEYOND THEIR BOUNDS";
  return `  ${methods.join(" and ")} ${verdict}: at most ${small(written.largest)} of ${small(written.allowed)} levels as written, ${small(unrounded.largest)} of ${small(unrounded.allowed)} before rounding${premultiplied ? ", colours times alpha" : ""}.`;
}
