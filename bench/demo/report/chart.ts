import { axisX, dot, gridX, link, plot, text, tickX } from "@observablehq/plot";
import { parseHTML } from "linkedom";
import { duration } from "../figures.js";
import type { Outcome } from "../measure.js";
import { escaped } from "./markup.js";

/** One method of one job. */
interface Bar {
  job: string;
  method: string;
  predicted: number;
  measured: number;
  chosen: boolean;
}

/** The chart, drawn twice: as wide as a page and as wide as a phone; the style shows the one that fits. */
export function timeChart(outcomes: readonly Outcome[]): string {
  const bars = outcomes.flatMap(barsOf);
  const words = escaped(bars.map((bar) => `${bar.job}, ${bar.method}: predicted ${duration(bar.predicted)}, measured ${duration(bar.measured)}`).join("; "));
  const drawn = (kind: "wide" | "narrow", width: number): string => `<div class="chart ${kind}" role="img" aria-label="${words}.">${drawChart(bars, outcomes, width)}</div>`;
  return drawn("wide", 760) + drawn("narrow", 328);
}

function barsOf(outcome: Outcome): Bar[] {
  return outcome.methods.flatMap(({ candidate, timing }) =>
    timing === undefined
      ? []
      : [{ job: outcome.job.title, method: candidate.method, predicted: candidate.milliseconds ?? NaN, measured: timing.median, chosen: candidate.method === outcome.explanation.method }],
  );
}

function drawChart(bars: readonly Bar[], outcomes: readonly Outcome[], width: number): string {
  const { document } = parseHTML("<!doctype html><html><body></body></html>");
  const times = bars.flatMap((bar) => [bar.predicted, bar.measured]);
  const low = Math.min(...times) / 1.6;
  const high = Math.max(...times) * 1.6;
  const decades = Array.from({ length: 12 }, (_, index) => 10 ** (index - 4)).filter((tick) => tick >= low && tick <= high);
  const name = (milliseconds: number): string => (milliseconds < 1000 ? `${milliseconds} ms` : `${milliseconds / 1000} s`);
  const place = { y: "method", fy: "job" } as const;
  const svg = plot({
    document: document as unknown as Document,
    width,
    height: 74 * outcomes.length + 26 * bars.length + 40,
    marginLeft: 92,
    marginRight: 18,
    marginTop: 26,
    marginBottom: 36,
    style: { fontSize: "13px", background: "transparent" },
    x: { type: "log", domain: [low, high], label: null },
    y: { label: null, padding: 0.4 },
    fy: { label: null, padding: 0.34, axis: null, domain: outcomes.map((outcome) => outcome.job.title) },
    marks: [
      gridX(decades, { stroke: "currentColor", strokeOpacity: 0.16 }),
      axisX(decades, { anchor: "bottom", tickFormat: name, label: null, tickSize: 4 }),
      text(outcomes, { fy: (outcome: Outcome) => outcome.job.title, text: (outcome: Outcome) => outcome.job.title, frameAnchor: "top-left", dx: -88, dy: -20, fontWeight: 650, textAnchor: "start" }),
      link(bars, { ...place, x1: "predicted", x2: "measured", y1: "method", y2: "method", stroke: "var(--rule)", strokeWidth: 3 }),
      tickX(bars, { ...place, x: "predicted", stroke: "var(--predicted)", strokeWidth: 3, insetTop: 1, insetBottom: 1 }),
      dot(bars, { ...place, x: "measured", r: 6, fill: (bar: Bar) => (bar.chosen ? "var(--chosen)" : "var(--other)"), stroke: "var(--paper)", strokeWidth: 1.5 }),
    ],
  });
  return svg.outerHTML;
}
