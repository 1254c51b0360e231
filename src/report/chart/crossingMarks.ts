import { dot, link, rect, text, type Markish } from "@observablehq/plot";
import type { Crossing } from "../../measure/types.js";
import { bySide } from "../figures.js";
import { shortName } from "../methodNames.js";
import { isCompact, lineHeight, textWidth, type Frame } from "./frame.js";
import { flags, type Flag } from "./placing.js";
import type { MeasuredPoint, Series } from "./points.js";

/** A crossing with its label. */
export interface LabelledCrossing extends Crossing {
  words: string;
  flag: Flag;
}

/** Crossings that lie on the axis, by size, with labels in rows above the lines. */
export function labelledCrossings(
  crossings: readonly Crossing[],
  { domain, x }: { domain: [number, number]; x(size: number): number },
  width: number,
  fontSize: number,
): LabelledCrossing[] {
  const onAxis = crossings
    .filter(({ size, interval }) => [size, ...interval].every((value) => value >= domain[0] && value <= domain[1]))
    .toSorted((a, b) => a.size - b.size);
  const words = onAxis.map((crossing) => labelOf(crossing, isCompact(width)));
  // Bold letters are wider.
  const poles = onAxis.map(({ size, leading }, k) => ({ at: x(size) + 5, extent: (leading ? 1.16 : 1) * textWidth(words[k]!, fontSize) }));
  const places = flags(poles, [2, width], fontSize);
  return onAxis.map((crossing, k) => ({ ...crossing, words: words[k]!, flag: places[k]! }));
}

function labelOf({ from, to, size, interval: [low, high] }: Crossing, compact: boolean): string {
  const where = `${bySide(Math.round(size))} (${Math.floor(low)}…${Math.ceil(high)})`;
  if (compact) return `${shortName(to)} from ${where}`;
  return `${shortName(to)} faster than ${shortName(from)} from ${where}`;
}

/** Bands and rules, to be drawn behind the lines. */
export function crossingBands(crossings: readonly LabelledCrossing[], frame: Frame): Markish[] {
  const leading = crossings.filter((one) => one.leading);
  const poles = crossings.flatMap((one) => poleOf(one, crossings, frame));
  return [
    rect(leading, {
      x1: (one: LabelledCrossing) => one.interval[0],
      x2: (one: LabelledCrossing) => one.interval[1],
      y1: { value: () => frame.top, scale: null },
      y2: { value: () => frame.bottom, scale: null },
      fill: "currentColor",
      fillOpacity: 0.09,
      className: "interval",
    }),
    link(poles, {
      x1: "size",
      x2: "size",
      y1: { value: "from", scale: null },
      y2: { value: "to", scale: null },
      stroke: "currentColor",
      strokeOpacity: (pole: Pole) => (pole.leading ? 0.85 : 0.5),
      className: "crossing-rule",
    }),
  ];
}

/** Rings where lines meet with the interval as a bar through them, and the labels. */
export function crossingMarks(crossings: readonly LabelledCrossing[], series: readonly Series[], frame: Frame): Markish[] {
  const met = crossings.flatMap((one) => {
    const y = meetingHeight(one, series, frame);
    return y === undefined ? [] : [{ ...one, y }];
  });
  type Met = (typeof met)[number];
  const y = { value: (one: Met) => one.y, scale: null };
  return [
    link(met, {
      x1: "size",
      x2: "size",
      y1: { value: () => frame.top, scale: null },
      y2: y,
      stroke: "currentColor",
      strokeOpacity: (one: Met) => (one.leading ? 0 : 0.5),
      strokeDasharray: "1 3",
      className: "crossing-drop",
    }),
    link(
      met.filter(({ leading }) => !leading),
      {
        x1: (one: Met) => one.interval[0],
        x2: (one: Met) => one.interval[1],
        y1: y,
        y2: y,
        stroke: "currentColor",
        strokeWidth: 1.5,
        className: "interval-bar",
      },
    ),
    dot(met, {
      x: "size",
      y,
      r: (one: Met) => (one.leading ? 7 : 5),
      stroke: "currentColor",
      strokeWidth: (one: Met) => (one.leading ? 2 : 1.25),
      className: "crossing",
      title: (one: Met) => one.words,
    }),
    ...[true, false].map((leading) =>
      text(
        crossings.filter((one) => one.leading === leading),
        {
          x: { value: (one: LabelledCrossing) => one.flag.start, scale: null },
          y: { value: (one: LabelledCrossing) => rowMiddle(one.flag.row, crossings, frame), scale: null },
          text: "words",
          textAnchor: "start",
          fontSize: frame.fontSize,
          fontWeight: leading ? 650 : 400,
          className: "crossing-label",
        },
      ),
    ),
  ];
}

/** Rows that the labels take. */
export function labelRows(crossings: readonly LabelledCrossing[]): number {
  return Math.max(0, ...crossings.map(({ flag }) => flag.row + 1));
}

function rowMiddle(row: number, crossings: readonly LabelledCrossing[], { top, fontSize }: Frame): number {
  return top - (labelRows(crossings) - row - 0.3) * lineHeight * fontSize;
}

interface Pole {
  size: number;
  leading: boolean;
  from: number;
  to: number;
}

/** The rule from a label down to where the lines are (a leading one: through them), with a gap at every label that lies in its way. */
function poleOf(crossing: LabelledCrossing, crossings: readonly LabelledCrossing[], frame: Frame): Pole[] {
  const { size, leading, flag } = crossing;
  const [at, half] = [frame.x(size), 0.7 * frame.fontSize];
  const inTheWay = crossings.filter((other) => other.flag.row > flag.row && other.flag.start - 3 < at && other.flag.end + 3 > at);
  const gaps = inTheWay.map((other) => rowMiddle(other.flag.row, crossings, frame)).toSorted((a, b) => a - b);
  const starts = [rowMiddle(flag.row, crossings, frame) + (flag.start > at ? -half : half), ...gaps.map((middle) => middle + half)];
  const ends = [...gaps.map((middle) => middle - half), leading ? frame.bottom : frame.top];
  return starts.map((from, k) => ({ size, leading, from, to: ends[k]! })).filter(({ from, to }) => to > from);
}

/** Height of the two lines at the crossing: the mean of both, each read between the measured points beside it. */
function meetingHeight({ from, to, size }: Crossing, series: readonly Series[], frame: Frame): number | undefined {
  const heights = [from, to].map((method) => heightAt(size, series.find((one) => one.method === method)?.measured ?? [], frame));
  const known = heights.filter((height) => height !== undefined);
  return known.length === 0 ? undefined : known.reduce((a, b) => a + b) / known.length;
}

function heightAt(size: number, points: readonly MeasuredPoint[], { x, y }: Frame): number | undefined {
  const after = points.findIndex((point) => point.size >= size);
  const [left, right] = [points[after - 1], points[after]];
  if (right === undefined) return undefined;
  if (right.size === size || left === undefined) return right.size === size ? y(right.milliseconds) : undefined;
  const share = (x(size) - x(left.size)) / (x(right.size) - x(left.size));
  return y(left.milliseconds) + share * (y(right.milliseconds) - y(left.milliseconds));
}
