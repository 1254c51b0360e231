import { complementaryErrorFunction } from "../math/elementary/errorFunction.js";
import { exponential } from "../math/elementary/exponential.js";
import { outer } from "./fromTaps.js";
import type { Kernel } from "./kernel.js";
import { asOptions, checkOptionNames, chosenWord } from "./options.js";
import { centreToSumOne } from "./sums.js";
import { type PerAxis, perAxis, radiusRange, sigmaRange } from "./sides.js";

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
 * Accuracy  each tap is within 12 ulp for σ ≥ ½ and radius ≤ 4σ; the two vectors sum to 1, their product to 1 within 1 ulp;
 *           the taps are symmetric to the last bit
 * @param options a bare number is the sigma of both axes
 * @throws ConvolutionError `unknown-option`, `invalid-number`, `unknown-value` (sampling), `invalid-kernel` (too many taps)
 * @example
 * gaussian({ sigma: 2 }); // 17×17
 * gaussian({ sigma: { x: 3, y: 0 }, sampling: "area" }); // 25×1, along rows only
 */
export function gaussian(options: GaussianOptions | number): Kernel {
  const { x, y } = gaussianVectors("gaussian", asOptions<GaussianOptions>("gaussian", options, "sigma"), ["sigma", "radius", "sampling"]);
  return outer(y, x);
}

/** The two vectors of a Gaussian kernel, from the options of a builder named `where`, which takes the options `names`. */
export function gaussianVectors(where: string, given: GaussianOptions, names: readonly string[]): { x: Float64Array<ArrayBuffer>; y: Float64Array<ArrayBuffer> } {
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
  for (let k = sigma > 0 ? 0 : radius + 1; k <= radius; k++) {
    heights[k] = sampling === "point" ? exponential((-k * k) / (2 * sigma * sigma)) : meanHeight(k, sigma);
  }
  let total = 0;
  for (let k = radius; k > 0; k--) total += 2 * heights[k]!;
  total += heights[0];
  const taps = new Float64Array(2 * radius + 1);
  for (let k = 0; k <= radius; k++) taps[radius - k] = taps[radius + k] = heights[k]! / total;
  return centreToSumOne(taps, radius);
}

/** The integral of the bell from k − ½ to k + ½, from the complement so that the flanks keep their digits. */
function meanHeight(k: number, sigma: number): number {
  const unit = sigma * Math.SQRT2;
  if (k === 0) return 1 - complementaryErrorFunction(0.5 / unit);
  return 0.5 * (complementaryErrorFunction((k - 0.5) / unit) - complementaryErrorFunction((k + 0.5) / unit));
}
