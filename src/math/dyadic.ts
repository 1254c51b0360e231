/** Most bits below the point that are looked at: taps with finer steps are not worth calling integers. */
const mostHalvings = 40;

function greatestCommonDivisor(a: number, b: number): number {
  while (b !== 0) [a, b] = [b, a % b];
  return a;
}

/**
 * The smallest integers in the same proportions, where all values are multiples of one power of two; else nothing.
 *
 * @example
 * integersOf(Float64Array.of(0.375, 0.25)); // 3, 2
 */
export function integersOf(values: Float64Array): Float64Array<ArrayBuffer> | undefined {
  let scale = 1;
  for (let halvings = 0; !allIntegers(values, scale); halvings++) {
    if (halvings === mostHalvings) return undefined;
    scale *= 2;
  }
  const integers = Float64Array.from(values);
  for (let k = 0; k < integers.length; k++) integers[k]! *= scale;
  let divisor = 0;
  for (const value of integers) {
    if (!Number.isSafeInteger(value)) return undefined;
    divisor = greatestCommonDivisor(divisor, Math.abs(value));
  }
  return divisor === 0 ? undefined : integers.map((value) => value / divisor);
}

function allIntegers(values: Float64Array, scale: number): boolean {
  for (const value of values) if (!Number.isInteger(value * scale)) return false;
  return true;
}
