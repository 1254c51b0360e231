import type { Method } from "../types.js";
import type { Crossing } from "./types.js";

/** Logarithm of one method's time over another's at a kernel size, and what noise leaves open. */
export interface Ratio {
  size: number;
  middle: number;
  low: number;
  high: number;
}

/** Sizes below which the first method is surely faster, and from which on the second one surely is. */
function openRange(ratios: readonly Ratio[]): { low: number; high: number } {
  const surelyFirst = ratios.filter(({ high }) => high < 0).map(({ size }) => size);
  const surelySecond = ratios.filter(({ low }) => low > 0).map(({ size }) => size);
  const firstSecond = Math.min(...surelySecond);
  const lastFirst = Math.max(...surelyFirst);
  // Where both occur on both sides (steps of the FFT's lengths), all in between is open.
  return {
    low: Math.max(...surelyFirst.filter((size) => size < firstSecond)),
    high: Math.min(...surelySecond.filter((size) => size > lastFirst)),
  };
}

/** Where a line through the logarithms of two neighbours meets 0, of all neighbours that change sides the middle one. */
function meeting(ratios: readonly Ratio[], low: number, high: number): number {
  const inside = ratios.filter(({ size }) => size >= low && size <= high);
  const meetings: number[] = [];
  for (const [index, after] of inside.entries()) {
    const before = inside[index - 1];
    if (!before || before.middle >= 0 === after.middle >= 0) continue;
    const part = before.middle / (before.middle - after.middle);
    meetings.push(before.size * (after.size / before.size) ** part);
  }
  return meetings[(meetings.length - 1) >> 1] ?? Math.sqrt(low * high);
}

/**
 * Where `to` overtakes `from` as kernels grow. Nothing where it does not in the range, or where it is ahead from the first size on.
 *
 * @param ratios log(time of from / time of to) by size, rising
 */
export function crossingOf(from: Method, to: Method, ratios: readonly Ratio[]): Omit<Crossing, "leading"> | undefined {
  if (!ratios.some(({ high }) => high < 0) || !ratios.some(({ low }) => low > 0)) return undefined;
  const { low, high } = openRange(ratios);
  if (!Number.isFinite(low) || !Number.isFinite(high) || low >= high) return undefined;
  return { from, to, size: Number(meeting(ratios, low, high).toPrecision(3)), interval: [low, high] };
}
