import { complementaryErrorFunction } from "../math/elementary/errorFunction.js";
import { compensatedSum } from "../math/compensatedSum.js";
import { productError } from "../math/doubleDouble.js";
import { exponential } from "../math/elementary/exponential.js";
import { outer } from "./fromTaps.js";
import type { Kernel } from "./kernel.js";
import { asOptions, checkOptionNames, chosenWord } from "./options.js";
import { centreToSumOne } from "./sums.js";
import { type PerAxis, perAxis, radiusRange, sigmaRange } from "./sides.js";

/** Bells narrower than this are 0 in double precision one sample away, e^(−1 / 2σ²) < 2⁻¹⁰⁷⁵. */
const pointLike = 0.02;

/** `point`: the bell's height at each sample. `area`: its mean over each sample's square. */
export type GaussianSampling = "point" | "area";

export interface GaussianOptions {
  /** Standard deviation in samples, 0…500; one number for both axes or `{ x, y }`. 0 leaves that axis as it is. */
  sigma: number | PerAxis;
  /** Taps on each side of the middle; one number or `{ x, y }`. @defaultValue ⌈4 · sigma⌉, which leaves out less than 0.0064 % of the bell */
  radius?: number | PerAxis | undefined;
  /** @defaultValue `"point"` */
  sampling?: GaussianSampling | undefined;
}

/**
 * The Gaussian bell, the product of a column and a row.
 *
 *     taps = g(sigma.y) · g(sigma.x)ᵀ,   −radius ≤ k ≤ radius,   each g divided by its sum
 *     point   g[k] ∝ e^(−k² / 2σ²)
 *     area    g[k] ∝ erf((k + ½) / σ√2) − erf((k − ½) / σ√2),   variance σ² + 1/12
 *
 * Accuracy  point: each tap within 2 ulp, area: within 16 + 8σ ulp (radius ≤ 4σ); the middle one takes what rounding left,
 *           less than 2⁻⁵². Both vectors sum to 1, their product to 1 within 1 ulp; taps are symmetric to the last bit
 * @param options a bare number is the sigma of both axes
 * @throws ConvolutionError `unknown-option`, `invalid-number`, `unknown-value` (sampling), `invalid-kernel` (too many taps)
 * @example
 * gaussian({ sigma: 2 }).width; // 17
 * gaussian({ sigma: { x: 1, y: 0 }, radius: { x: 1, y: 0 }, sampling: "area" }).taps; // [0.2790, 0.4420, 0.2790]
 */
export function gaussian(options: GaussianOptions | number): Kernel {
  const { x, y } = gaussianVectors("gaussian", asOptions<GaussianOptions>("gaussian", options, "sigma"), ["sigma", "radius", "sampling"]);
  return outer(y, x);
}

/** The two vectors of a Gaussian kernel, from the options of a builder named `where`, which takes the options `names`. */
export function gaussianVectors(
  where: string,
  given: GaussianOptions,
  names: readonly string[],
): { x: Float64Array<ArrayBuffer>; y: Float64Array<ArrayBuffer> } {
  checkOptionNames(where, given, names);
  const sigma = perAxis(where, "sigma", given.sigma, sigmaRange);
  const radius = perAxis(where, "radius", given.radius ?? { x: Math.ceil(4 * sigma.x), y: Math.ceil(4 * sigma.y) }, radiusRange);
  const sampling = chosenWord(where, "sampling", given.sampling ?? "point", ["point", "area"] as const);
  return { x: gaussianTaps(sigma.x, radius.x, sampling), y: gaussianTaps(sigma.y, radius.y, sampling) };
}

/**
 * 2 · radius + 1 taps of the bell, with sum 1.
 *
 * Requires  sigma ≥ 0, radius whole and ≥ 0
 */
export function gaussianTaps(sigma: number, radius: number, sampling: GaussianSampling): Float64Array<ArrayBuffer> {
  const heights = new Float64Array(radius + 1);
  heights[0] = 1;
  const heightOf = sampling === "point" ? height : meanHeight;
  for (let k = sigma < pointLike ? radius + 1 : 0; k <= radius; k++) heights[k] = heightOf(k, sigma);
  const taps = new Float64Array(2 * radius + 1);
  for (let k = 0; k <= radius; k++) taps[radius - k] = taps[radius + k] = heights[k]!;
  const total = compensatedSum(taps);
  for (let k = 0; k < taps.length; k++) taps[k] = taps[k]! / total;
  return centreToSumOne(taps, radius);
}

/** e^(−k² / 2σ²), the exponent carried as high + low: its rounding would show in the flanks. */
function height(k: number, sigma: number): number {
  const variance = sigma * sigma;
  const divisor = 2 * variance;
  const exponent = (k * k) / divisor;
  const rest = k * k - exponent * divisor - productError(exponent, divisor) - 2 * exponent * productError(sigma, sigma);
  return exponential(-exponent, -rest / divisor);
}

/** The integral of the bell from k − ½ to k + ½, from the complement so that the flanks keep their digits. */
function meanHeight(k: number, sigma: number): number {
  const unit = sigma * Math.SQRT2;
  if (k === 0) return 1 - complementaryErrorFunction(0.5 / unit);
  return 0.5 * (complementaryErrorFunction((k - 0.5) / unit) - complementaryErrorFunction((k + 0.5) / unit));
}
