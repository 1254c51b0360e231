/** Kernel sizes that an axis may name: odd, each about twice the one before. */
const sizes = [3, 5, 9, 15, 31, 63, 127, 255, 511, 1023];

/** Sizes to name between two ends; the sizes that were measured where fewer than two usual ones lie there. */
export function sizeTicks(low: number, high: number, measured: readonly number[]): number[] {
  const usual = sizes.filter((size) => size >= low && size <= high);
  if (usual.length >= 2 || measured.length === 0) return usual;
  const [first, last] = [measured[0]!, measured.at(-1)!];
  return first === last ? [first] : [first, last];
}

/**
 * Times to name between two ends: 1, 2 and 5 times the powers of ten, or the powers alone where those are more than `most`.
 *
 * @param low above 0, as `high`
 */
export function timeTicks(low: number, high: number, most: number): number[] {
  const powers = Array.from({ length: 16 }, (_, k) => Number(`1e${k - 7}`));
  const between = (factors: readonly number[]): number[] =>
    powers.flatMap((power) => factors.map((factor) => Number((factor * power).toPrecision(1)))).filter((time) => time >= low && time <= high);
  return [[1, 2, 5], [1, 3], [1]].map(between).find((ticks) => ticks.length <= most) ?? between([1]).filter((_, k) => k % 2 === 0);
}
