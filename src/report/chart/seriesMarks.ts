import { areaY, dot, line, link, text, type Markish } from "@observablehq/plot";
import { bySide, duration } from "../figures.js";
import { shortName } from "../methodNames.js";
import { signs, strokeOf } from "./colours.js";
import type { Frame } from "./frame.js";
import { apart } from "./placing.js";
import type { MeasuredPoint, Point, Series } from "./points.js";

/** Columns from the end of a line to the beginning of its name. */
export const labelGap = 14;

/** An earlier measurement: thin and grey, behind everything. */
export function earlierMarks(series: readonly Series[]): Markish[] {
  return series.flatMap(({ method, measured }) => [
    line(measured, { x: "size", y: "milliseconds", stroke: "currentColor", strokeOpacity: 0.55, strokeWidth: 1, className: `earlier ${method}` }),
    dot(measured, {
      x: "size",
      y: "milliseconds",
      symbol: signs[method].symbol,
      r: 2.5,
      stroke: "currentColor",
      strokeOpacity: 0.6,
      strokeWidth: 1,
      className: `earlier-dots ${method}`,
      title: (point: Point) => `earlier, ${titleOf(method, point)}`,
    }),
  ]);
}

/** One method: the band of quartiles, what was predicted, what was measured. */
export function seriesMarks({ method, measured, predicted }: Series): Markish[] {
  const stroke = strokeOf(method);
  const place = { x: "size", y: "milliseconds" } as const;
  const isAlone = measured.length === 1;
  return [
    areaY(measured, { x: "size", y1: "low", y2: "high", fill: stroke, fillOpacity: 0.2, className: `quartiles ${method}` }),
    isAlone ? link(measured, { x1: "size", x2: "size", y1: "low", y2: "high", stroke, strokeWidth: 6, strokeOpacity: 0.25 }) : null,
    predicted.length === 1 ? dot(predicted, { ...place, r: 7, stroke, strokeWidth: 1.5, strokeDasharray: "3 2" }) : null,
    line(predicted, { ...place, stroke, strokeWidth: 1.5, strokeDasharray: "5 4", className: `predicted ${method}` }),
    line(measured, { ...place, stroke, strokeWidth: 2.25, strokeLinejoin: "round", className: `measured ${method}` }),
    dot(measured, {
      ...place,
      symbol: signs[method].symbol,
      r: 3.5,
      fill: stroke,
      className: `dots ${method}`,
      title: (point: MeasuredPoint) =>
        `${shortName(method)}, ${bySide(point.size)}: ${duration(point.milliseconds)} (${duration(point.low)} … ${duration(point.high)})`,
    }),
  ];
}

/** The names of the methods where their lines end, moved apart where they would overlap. */
export function endLabels(series: readonly Series[], frame: Frame): Markish[] {
  const ends = series.map(({ method, measured, predicted }) => {
    const last = [...predicted, ...measured].reduce((a, b) => (b.size >= a.size ? b : a));
    return { method, x: frame.x(last.size), y: frame.y(last.milliseconds) };
  });
  const heights = apart(
    ends.map(({ y }) => ({ at: y, extent: 1.3 * frame.fontSize })),
    [frame.top - 0.5 * frame.fontSize, frame.bottom + 0.5 * frame.fontSize],
  );
  const labels = ends.map((end, k) => ({ ...end, labelY: heights[k]! }));
  type Label = (typeof labels)[number];
  return labels.flatMap((label) => [
    link([label], {
      x1: { value: (one: Label) => one.x + 6, scale: null },
      y1: { value: "y", scale: null },
      x2: { value: () => frame.right + labelGap - 5, scale: null },
      y2: { value: "labelY", scale: null },
      stroke: strokeOf(label.method),
      strokeWidth: 1,
      strokeOpacity: Math.abs(label.labelY - label.y) < 1 && frame.right - label.x < 12 ? 0 : 0.7,
      strokeDasharray: "1 2",
    }),
    text([label], {
      x: { value: () => frame.right + labelGap, scale: null },
      y: { value: "labelY", scale: null },
      text: (one: Label) => shortName(one.method),
      textAnchor: "start",
      fill: strokeOf(label.method),
      fontWeight: 650,
      fontSize: frame.fontSize,
      className: `name ${label.method}`,
    }),
  ]);
}

function titleOf(method: Series["method"], { size, milliseconds }: Point): string {
  return `${shortName(method)}, ${bySide(size)}: ${duration(milliseconds)}`;
}
