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
  const words = escaped(
    bars
      .filter(({ measured }) => measured > 0)
      .map((bar) => `${bar.job}, ${bar.method}: predicted ${duration(bar.predicted)}, measured ${duration(bar.measured)}`)
      .join("; "),
  );
  const drawn = (kind: "wide" | "narrow", width: number): string =>
    `<div class="chart ${kind}" role="img" aria-label="${words}.">${drawChart(bars, outcomes, width)}</div>`;
  return drawn("wide", 1040) + drawn("narrow", 328);
}

function barsOf(outcome: Outcome): Bar[] {
  return outcome.methods.map(({ candidate, timing }) => {
    const place = { job: outcome.job.title, method: candidate.method };
    if (timing === undefined) return { ...place, predicted: NaN, measured: NaN, chosen: false };
    return { ...place, predicted: candidate.milliseconds ?? NaN, measured: timing.median, chosen: candidate.method === outcome.explanation.method };
  });
}

function drawChart(bars: readonly Bar[], outcomes: readonly Outcome[], width: number): string {
  const { document } = parseHTML("<!doctype html><html><body></body></html>");
  const timed = bars.filter(({ measured }) => measured > 0);
  const refused = bars.filter(({ measured }) => !(measured > 0));
  const times = timed.flatMap((bar) => [bar.predicted, bar.measured]);
  const low = Math.min(...times) / 1.6;
  const high = Math.max(...times) * (width < 400 ? 6 : 2.4);
  const decades = Array.from({ length: 12 }, (_, index) => 10 ** (index - 4)).filter((tick) => tick >= low && tick <= high);
  const name = (milliseconds: number): string => (milliseconds < 1000 ? `${milliseconds} ms` : `${milliseconds / 1000} s`);
  const place = { y: "method", fy: "job" } as const;
  const svg = plot({
    document: document as unknown as Document,
    width,
    height: 46 * outcomes.length + 24 * bars.length + 50,
    marginLeft: 92,
    marginRight: 18,
    marginTop: 26,
    marginBottom: 36,
    style: { fontSize: "13px", background: "transparent" },
    x: { type: "log", domain: [low, high], label: null },
    y: { label: null, padding: 0.4, tickSize: 0, domain: [...new Set(bars.map(({ method }) => method))] },
    fy: { label: null, padding: 0.34, axis: null, domain: outcomes.map((outcome) => outcome.job.title) },
    marks: [
      gridX(decades, { stroke: "currentColor", strokeOpacity: 0.16 }),
      axisX(decades, { anchor: "bottom", tickFormat: name, label: null, tickSize: 0 }),
      text(outcomes, {
        fy: (outcome: Outcome) => outcome.job.title,
        text: (outcome: Outcome) => outcome.job.title,
        frameAnchor: "top-left",
        dx: -88,
        dy: -20,
        fontWeight: 650,
        textAnchor: "start",
      }),
      link(timed, { ...place, x1: "predicted", x2: "measured", y1: "method", y2: "method", stroke: "var(--rule)", strokeWidth: 3 }),
      dot(timed, {
        ...place,
        x: "measured",
        r: 5.5,
        fill: (bar: Bar) => (bar.chosen ? "var(--chosen)" : "var(--other)"),
        stroke: "var(--paper)",
        strokeWidth: 1.5,
      }),
      tickX(timed, { ...place, x: "predicted", stroke: "var(--predicted)", strokeWidth: 2.5, insetTop: -2, insetBottom: -2 }),
      text(timed, {
        ...place,
        x: (bar: Bar) => Math.max(bar.predicted, bar.measured),
        text: (bar: Bar) => duration(bar.measured),
        dx: 12,
        textAnchor: "start",
      }),
      text(refused, { ...place, text: () => "does not apply", frameAnchor: "left", dx: 6, textAnchor: "start", fillOpacity: 0.6, fontStyle: "italic" }),
    ],
  });
  return svg.outerHTML;
}
