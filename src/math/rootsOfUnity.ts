import { productError } from "./doubleDouble.js";

/** 2π = high + low, to 107 bits. */
const fullTurnHigh = 6.283185307179586;
const fullTurnLow = 2.4492935982947064e-16;

/** (−1)ᵏ / (2k + 3)!, k = 0…8: sin θ = θ + θ³ · Σ, the first term left out is below 2⁻⁷⁰ of θ on [0, π/4]. */
const sineSeries = reciprocalFactorials(3, 9);
/** (−1)ᵏ / (2k + 4)!, k = 0…8: cos θ = 1 − θ²/2 + θ⁴ · Σ. */
const cosineSeries = reciprocalFactorials(4, 9).map((coefficient) => -coefficient);

export interface Root {
  cosine: number;
  sine: number;
}

/**
 * The point k / n of a turn around the unit circle.
 *
 *     cosine = cos(2πk / n),   sine = sin(2πk / n)
 *
 * k need not be whole: `rootOfUnity(30, 360)` is the direction of 30 degrees. The angle is brought into the first octant
 * exactly, before anything is rounded, so that all symmetries hold to the last bit and quarter turns are exact.
 *
 * Accuracy  < 0.75 ulp each
 * Requires  k finite, n > 0, n < 2⁵⁰
 */
export function rootOfUnity(k: number, n: number): Root {
  let part = Math.abs(k) % n;
  // Each subtraction below is exact: its operands are within a factor of two of each other.
  const lowerHalf = 2 * part >= n;
  if (lowerHalf) part -= n / 2;
  const secondQuarter = 4 * part >= n;
  if (secondQuarter) part -= n / 4;
  const secondOctant = 8 * part > n;
  if (secondOctant) part = n / 4 - part;
  let { cosine, sine } = firstOctant(part, n);
  if (secondOctant) [cosine, sine] = [sine, cosine];
  if (secondQuarter) [cosine, sine] = [0 - sine, cosine];
  if (lowerHalf) cosine = 0 - cosine;
  if (lowerHalf !== k < 0) sine = 0 - sine;
  return { cosine, sine };
}

/**
 * The n-th roots of unity, for the tables of discrete Fourier transforms of length n.
 *
 *     cosine[k] = cos(2πk / n),   sine[k] = sin(2πk / n),   0 ≤ k < n
 *
 * Accuracy  < 0.75 ulp each
 */
export function rootsOfUnity(n: number): { cosine: Float64Array<ArrayBuffer>; sine: Float64Array<ArrayBuffer> } {
  const cosine = new Float64Array(n);
  const sine = new Float64Array(n);
  // The lower half is the mirror image of the upper one, bit for bit.
  for (let k = 0; 2 * k <= n; k++) {
    const root = rootOfUnity(k, n);
    const mirrored = (n - k) % n;
    cosine[mirrored] = cosine[k] = root.cosine;
    sine[mirrored] = 0 - root.sine;
    sine[k] = root.sine;
  }
  return { cosine, sine };
}

/** The same for 0 ≤ k ≤ n / 8, θ = 2πk / n carried as high + low. */
function firstOctant(k: number, n: number): Root {
  if (8 * k === n) return { cosine: Math.SQRT1_2, sine: Math.SQRT1_2 };
  const turn = k / n;
  const turnLow = (k - turn * n - productError(turn, n)) / n;
  const high = turn * fullTurnHigh;
  const low = productError(turn, fullTurnHigh) + (turnLow * fullTurnHigh + turn * fullTurnLow);
  const square = high * high;
  const half = square * 0.5;
  const rest = 1 - half;
  const cosineTail = square * square * polynomial(cosineSeries, square) - productError(high, high) * 0.5 - high * low;
  const sineTail = high * square * polynomial(sineSeries, square) + low * rest;
  return { cosine: rest + (1 - rest - half + cosineTail), sine: high + sineTail };
}

/** Σ coefficients[k] · xᵏ, by Horner's rule. */
function polynomial(coefficients: readonly number[], x: number): number {
  let value = 0;
  for (let k = coefficients.length - 1; k >= 0; k--) value = value * x + coefficients[k]!;
  return value;
}

/** −1 / first!, +1 / (first + 2)!, … */
function reciprocalFactorials(first: number, count: number): number[] {
  const values: number[] = [];
  let factorial = 1;
  for (let k = 2; k < first + 2 * count; k++) {
    factorial *= k;
    if (k >= first && (k - first) % 2 === 0) values.push((((k - first) / 2) % 2 === 0 ? -1 : 1) / factorial);
  }
  return values;
}
