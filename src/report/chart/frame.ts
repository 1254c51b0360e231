import { scale } from "@observablehq/plot";
import type { Series } from "./points.js";

/** Where everything goes: the part of the drawing that the lines are in, and the scales, in pixels. */
export interface Frame {
  width: number;
  height: number;
  /** Narrow: fewer and shorter words. */
  compact: boolean;
  fontSize: number;
  left: number;
  right: number;
  top: number;
  bottom: number;
  sizeDomain: [number, number];
  timeDomain: [number, number];
  x(size: number): number;
  y(milliseconds: number): number;
}

interface Room {
  width: number;
  /** Columns beside the lines for the names of methods. */
  beside: number;
  /** Rows above the lines for labels of crossings, and below for the key. */
  above: number;
  below: number;
}

/** What the axes span where nothing has been measured: usual sizes, and times of a small image. */
const emptySizes: [number, number] = [3, 127];
const emptyTimes: [number, number] = [1, 100];

/** Rows of text are as high as this many times the font. */
export const lineHeight = 1.45;

export function fontSizeFor(width: number): number {
  return isCompact(width) ? 11 : 13;
}

export function isCompact(width: number): boolean {
  return width < 620;
}

/** Width of a text, about: system fonts are a little over half their height a letter. */
export function textWidth(text: string, fontSize: number): number {
  return text.length * fontSize * 0.56;
}

/** Left margin: the longest label of the time axis. */
const leftMargin = (fontSize: number): number => Math.round(5 * fontSize);

/** The columns that lines have, before it is known how many rows of labels stand above them. */
export function sizeAxis(
  series: readonly Series[],
  width: number,
  beside: number,
): { domain: [number, number]; left: number; right: number; x(size: number): number } {
  const sizes = series.flatMap(({ measured, predicted }) => [...measured, ...predicted].map(({ size }) => size));
  const domain = widened(sizes.length === 0 ? emptySizes : [Math.min(...sizes), Math.max(...sizes)], 1.07);
  const [left, right] = [leftMargin(fontSizeFor(width)), width - beside];
  return { domain, left, right, x: logarithmic(domain, [left, right]) };
}

export function frameFor(series: readonly Series[], { width, beside, above, below }: Room): Frame {
  const fontSize = fontSizeFor(width);
  const axis = sizeAxis(series, width, beside);
  const times = series.flatMap(({ measured, predicted }) => [
    ...measured.flatMap(({ low, high }) => [low, high]),
    ...predicted.map(({ milliseconds }) => milliseconds),
  ]);
  const timeDomain = widened(times.length === 0 ? emptyTimes : [Math.min(...times), Math.max(...times)], times.length < 3 ? 2 : 1.2);
  const linesHeight = Math.round(Math.min(Math.max(0.5 * (axis.right - axis.left), 230), 430));
  const top = Math.round((above + 1.7) * lineHeight * fontSize);
  const bottom = top + linesHeight;
  return {
    width,
    height: Math.round(bottom + (below + 3.1) * lineHeight * fontSize),
    compact: isCompact(width),
    fontSize,
    left: axis.left,
    right: axis.right,
    top,
    bottom,
    sizeDomain: axis.domain,
    timeDomain,
    x: axis.x,
    y: logarithmic(timeDomain, [bottom, top]),
  };
}

function widened([low, high]: [number, number], factor: number): [number, number] {
  return low === high ? [low / (2 * factor), high * 2 * factor] : [low / factor, high * factor];
}

function logarithmic(domain: [number, number], range: [number, number]): (value: number) => number {
  return scale({ x: { type: "log", domain, range } })!.apply as (value: number) => number;
}
