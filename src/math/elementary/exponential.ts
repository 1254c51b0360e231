/** ln 2 = high + low; high has 32 bits, so that its products with exponents of 11 bits are exact. */
const ln2High = 0.6931471803691238;
const ln2Low = 1.9082149292705877e-10;
const reciprocalLn2 = 1.4426950408889634;

/** 1 / k!, k = 2…14: eʳ = 1 + r + r² · Σ, the first term left out is below 2⁻⁶⁰ for |r| ≤ ln 2 / 2. */
const series = reciprocalFactorials();

/**
 * eˣ in additions, multiplications and divisions only: the same bits in every JavaScript engine.
 *
 *     eˣ = 2ᵏ · eʳ,   k = ⌊x / ln 2 + ½⌋,   r = x − k · ln 2,   eʳ by its Taylor series
 *
 * Accuracy  < 1 ulp; < 1.5 ulp where the result is subnormal
 * @param x any number; −∞ gives 0, NaN gives NaN
 * @param xLow a correction so small that x + xLow rounds to x: e^(x + xLow)
 */
export function exponential(x: number, xLow = 0): number {
  if (!(x < 710)) return x > 0 ? Infinity : x;
  if (x < -746) return 0;
  const k = Math.floor(x * reciprocalLn2 + 0.5);
  const high = x - k * ln2High;
  const low = k * ln2Low - xLow;
  const r = high - low;
  const rLow = high - r - low;
  let sum = series[series.length - 1]!;
  for (let i = series.length - 2; i >= 0; i--) sum = sum * r + series[i]!;
  const linear = 1 + r;
  return timesPowerOfTwo(linear + (1 - linear + r + (r * r * sum + rLow * linear)), k);
}

/** x · 2ᵏ for −1080 ≤ k ≤ 1030, exact where the result is a normal number. */
function timesPowerOfTwo(x: number, k: number): number {
  const half = Math.trunc(k / 2);
  return x * powerOfTwo(half) * powerOfTwo(k - half);
}

/** 2ᵏ for −1022 ≤ k ≤ 1023, exactly, by squaring. */
function powerOfTwo(k: number): number {
  let power = 1;
  let factor = k < 0 ? 0.5 : 2;
  for (let rest = Math.abs(k); rest > 0; rest = Math.floor(rest / 2)) {
    if (rest % 2 === 1) power *= factor;
    factor *= factor;
  }
  return power;
}

function reciprocalFactorials(): number[] {
  const values: number[] = [];
  let factorial = 1;
  for (let k = 2; k <= 14; k++) {
    factorial *= k;
    values.push(1 / factorial);
  }
  return values;
}
