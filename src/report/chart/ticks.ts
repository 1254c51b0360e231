/** Kernel sizes that an axis may name: odd, each about twice the one before. */
const sizes = [3, 5, 9, 15, 31, 63, 127, 255, 511, 1023];

/** Factors of the powers of ten: the usual ones, finer ones for short axes, coarser ones for long. */
const usual = [1, 2, 5];
const finer = [
  [1, 1.5, 2, 3, 4, 6, 8],
  [1, 1.2, 1.4, 1.6, 1.8, 2, 2.4, 2.8, 3.2, 3.6, 4, 4.5, 5, 6, 7, 8, 9],
];
const coarser = [[1, 3], [1]];

/** Sizes to name between two ends; the first and last that were measured where fewer than two usual ones lie there. */
export function sizeTicks(low: number, high: number, measured: readonly number[]): number[] {
  const inside = sizes.filter((size) => size >= low && size <= high);
  if (inside.length >= 2 || measured.length === 0) return inside;
  return [...new Set([measured[0]!, measured.at(-1)!])];
}

/** As many of rising places as have room, the last one surely: each takes `extent` about its middle. */
export function withRoom(ticks: readonly number[], place: (tick: number) => number, extent: number): number[] {
  const kept: number[] = [];
  for (const tick of ticks.toReversed()) if (kept.length === 0 || place(kept[0]!) - place(tick) >= extent) kept.unshift(tick);
  return kept;
}

/**
 * Times to name between two ends: 1, 2 and 5 times the powers of ten; finer where those are fewer than three, coarser where more than `most`.
 *
 * @param low above 0, as `high`
 */
export function timeTicks(low: number, high: number, most: number): number[] {
  const powers = Array.from({ length: 18 }, (_, k) => Number(`1e${k - 9}`));
  const between = (factors: readonly number[]): number[] =>
    powers.flatMap((power) => factors.map((factor) => Number((factor * power).toPrecision(2)))).filter((time) => time >= low && time <= high);
  const wanted = between(usual);
  if (wanted.length >= 3) return [wanted, ...coarser.map(between)].find((ticks) => ticks.length <= most) ?? between([1]).filter((_, k) => k % 2 === 0);
  return finer.map(between).find((ticks) => ticks.length >= 3) ?? between(finer.at(-1)!);
}
