/**
 * The sum of doubles, with the rounding errors of the additions summed beside it.
 *
 *     |error| ≤ u·|Σx| + O(n·u²)·Σ|x|,   u = 2⁻⁵³
 *
 * Exact where all partial sums are representable.
 *
 * Source  Neumaier, Rundungsfehleranalyse einiger Verfahren zur Summation endlicher Summen, ZAMM 54, 1974
 */
export function compensatedSum(values: ArrayLike<number>): number {
  let sum = 0;
  let correction = 0;
  for (let i = 0; i < values.length; i++) {
    const value = values[i]!;
    const next = sum + value;
    correction += Math.abs(sum) >= Math.abs(value) ? sum - next + value : value - next + sum;
    sum = next;
  }
  return sum + correction;
}
