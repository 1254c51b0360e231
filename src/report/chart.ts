import { gridX, gridY, plot, text, type Markish } from "@observablehq/plot";
import type { Crossover } from "../measure/types.js";
import { crossingBands, crossingMarks, labelRows, labelledCrossings } from "./chart/crossingMarks.js";
import { fontSizeFor, frameFor, lineHeight, sizeAxis, textWidth, type Frame } from "./chart/frame.js";
import { keyEntries, keyMarks, keyRows } from "./chart/key.js";
import { seriesOf, type Series } from "./chart/points.js";
import { earlierMarks, endLabels, labelGap, seriesMarks } from "./chart/seriesMarks.js";
import { sizeTicks, timeTicks, withRoom } from "./chart/ticks.js";
import { bySide, roundDuration } from "./figures.js";
import { shortName } from "./methodNames.js";
import { answerSentence } from "./sentences.js";

export interface ChartOptions {
  /** Makes the elements: a page's, or `nodeDocument()`. */
  document: Document;
  /** Width of the drawing in pixels: 320 to 1600. Below 620 it has fewer and shorter words. */
  width: number;
  /** Drawn thin and grey behind, to compare with. @defaultValue none */
  earlier?: Crossover;
}

/**
 * Draws time against kernel size, both logarithmic: a line, a shape and a name for each method, predicted times dashed, crossings with their
 * intervals. Takes what there is: a finished crossover, one that is being measured, one size, none.
 *
 * @param crossover its strings are not shown
 * @returns an SVG element with a text alternative, without style sheet, script or identifiers; `chartStyle` gives it its colours
 */
export function crossoverChart(crossover: Crossover, { document, width, earlier }: ChartOptions): SVGSVGElement {
  const [series, before] = [seriesOf(crossover), earlier === undefined ? [] : seriesOf(earlier)];
  const fontSize = fontSizeFor(width);
  const drawn = [...series, ...before.map((one) => ({ ...one, predicted: [] }))].filter(({ measured, predicted }) => measured.length + predicted.length > 0);
  const beside = Math.ceil(labelGap + 4 + Math.max(0, ...series.map(({ method }) => 1.08 * textWidth(shortName(method), fontSize))));
  const axis = sizeAxis(drawn, width, beside);
  const crossings = labelledCrossings(crossover.crossings, axis, width, fontSize);
  const key = keyEntries(keyOf(series, before, crossings.length > 0), width, fontSize);
  const frame = frameFor(drawn, { width, beside, above: labelRows(crossings), below: keyRows(key) });
  const svg = plot({
    document,
    width,
    height: frame.height,
    marginLeft: frame.left,
    marginRight: width - frame.right,
    marginTop: frame.top,
    marginBottom: frame.height - frame.bottom,
    className: "tapwise-chart",
    x: { type: "log", domain: frame.sizeDomain, axis: null },
    y: { type: "log", domain: frame.timeDomain, axis: null },
    marks: [
      axes(frame, crossover, series.length > 0 ? timeTicks(...frame.timeDomain, frame.compact ? 8 : 10) : []),
      crossingBands(crossings, frame),
      earlierMarks(before),
      series.map(seriesMarks),
      crossingMarks(crossings, series, frame),
      endLabels(series, frame),
      keyMarks(key, frame),
      series.length === 0
        ? text(["No kernel size has been measured yet"], { frameAnchor: "middle", text: (words: string) => words, fontSize: 1.1 * fontSize })
        : null,
    ],
  }) as SVGSVGElement;
  svg.querySelector("style")?.remove();
  // The parts of an image have no names of their own.
  for (const part of svg.querySelectorAll("[aria-label], [aria-hidden]")) for (const name of ["aria-label", "aria-hidden"]) part.removeAttribute(name);
  svg.setAttribute("font-size", String(fontSize));
  svg.setAttribute("role", "img");
  svg.setAttribute("aria-label", `Time of one run against kernel size, ${series.length === 0 ? "empty" : "one line a method"}. ${answerSentence(crossover)}`);
  return svg;
}

function axes(frame: Frame, { rows }: Crossover, times: readonly number[]): Markish[] {
  const measured = rows.map(({ size }) => size).toSorted((a, b) => a - b);
  const words = frame.compact ? String : bySide;
  const { fontSize } = frame;
  const candidates = sizeTicks(...frame.sizeDomain, measured);
  const sizes = withRoom(candidates, frame.x, textWidth(words(candidates.at(-1) ?? 0), fontSize) + 4);
  const label = (content: string, x: number, y: number, textAnchor: "start" | "end"): Markish =>
    text([content], { x: { value: [x], scale: null }, y: { value: [y], scale: null }, text: (one: string) => one, textAnchor, fontSize, fillOpacity: 0.85 });
  return [
    gridX(sizes, { stroke: "currentColor", strokeOpacity: 0.13 }),
    gridY(times, { stroke: "currentColor", strokeOpacity: 0.13 }),
    // An axis leaves out some labels of a logarithmic scale.
    text(sizes, { x: (size: number) => size, text: (size: number) => words(size), frameAnchor: "bottom", dy: 1.3 * fontSize, fontSize, className: "sizes" }),
    text(times, {
      y: (time: number) => time,
      text: (time: number) => roundDuration(time),
      frameAnchor: "left",
      dx: -8,
      textAnchor: "end",
      fontSize,
      className: "times",
    }),
    label(frame.compact ? "kernel size, taps a side" : "kernel size, taps", frame.right, frame.bottom + 1.85 * lineHeight * fontSize, "end"),
    label("time of one run", 0, 0.75 * fontSize, "start"),
  ];
}

function keyOf(series: readonly Series[], before: readonly Series[], crosses: boolean): Parameters<typeof keyEntries>[0] {
  return [
    ...(series.some(({ measured }) => measured.length > 0) ? [{ kind: "measured", words: "measured, with the middle half of the times" } as const] : []),
    ...(series.some(({ predicted }) => predicted.length > 0) ? [{ kind: "predicted", words: "predicted" } as const] : []),
    ...(crosses ? [{ kind: "crossing", words: "crossing, with its interval" } as const] : []),
    ...(before.length > 0 ? [{ kind: "earlier", words: "measured earlier" } as const] : []),
  ];
}
