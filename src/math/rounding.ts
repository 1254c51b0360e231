/** Unit roundoff of single precision, 2⁻²⁴. */
export const unitRoundoff = 5.9604644775390625e-8;

/**
 * γ(k) = k·u ÷ (1 − k·u): the largest relative error of a sum whose terms pass through k roundings.
 * Infinite from k = 2²⁴ on, where the theory says nothing.
 *
 * Source  Higham, Accuracy and Stability of Numerical Algorithms, 2nd ed., §3.1
 */
export function gamma(roundings: number): number {
  const product = roundings * unitRoundoff;
  return product < 1 ? product / (1 - product) : Infinity;
}

/** ⌈log₂ n⌉ for an integer n ≥ 1. */
function ceilLog2(n: number): number {
  let power = 0;
  for (let reached = 1; reached < n; reached *= 2) power++;
  return power;
}

/**
 * Error of convolving through single-precision transforms of N points in all, in units of max|x|.
 *
 *     |error| ≤ 2 · log₂(N) · u · Σ|h| · max|x|
 *
 * The shape O(u·log N) is a theorem for the 2-norm with roots of unity rounded once; the factor is empirical, about seven times
 * what was measured with random images of 64² … 2048² samples.
 *
 * Source  Higham, as above, §24.1; Schatzman, Accuracy of the discrete Fourier transform and the fast Fourier transform, SIAM J. Sci. Comput. 17(5), 1996
 */
export function transformError(points: number): number {
  return 2 * ceilLog2(points) * unitRoundoff;
}
