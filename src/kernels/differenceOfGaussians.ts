import { gaussianTaps, type GaussianSampling } from "./gaussian.js";
import { allowedTapCount } from "./fromTaps.js";
import { type Kernel, makeKernel } from "./kernel.js";
import { type NumberRange, asOptions, checkOptionNames, checkedNumber, chosenWord } from "./options.js";
import { radiusRange } from "./sides.js";
import { centreToSumZero } from "./sums.js";

export interface DifferenceOfGaussiansOptions {
  /** Standard deviation of the narrow bell in samples, above 0, at most 500. */
  sigma: number;
  /** Standard deviation of the wide bell over that of the narrow one, above 1, at most 100. @defaultValue 1.6 */
  ratio?: number | undefined;
  /** Taps on each side of the middle. @defaultValue ⌈4 · ratio · sigma⌉ */
  radius?: number | undefined;
  /** @defaultValue `"point"` */
  sampling?: GaussianSampling | undefined;
}

const sigmaRange: NumberRange = { what: "a number of samples above 0, at most 500", above: 0, most: 500 };
const ratioRange: NumberRange = { what: "a number above 1, at most 100", above: 1, most: 100 };

/**
 * A narrow Gaussian less a wide one: a band-pass, and near the ratio 1.6 much like minus the Laplacian of a Gaussian.
 *
 *     taps = G(sigma) − G(ratio · sigma),   each G of sum 1
 *
 * Accuracy  the taps sum to exactly 0, in any order; they are symmetric to the last bit
 * @param options a bare number is sigma
 * @throws ConvolutionError `unknown-option`, `invalid-number`, `unknown-value` (sampling), `invalid-kernel` (too many taps)
 * Source  Marr & Hildreth, Theory of edge detection, Proceedings of the Royal Society B 207, 1980 (the ratio)
 * @example
 * differenceOfGaussians({ sigma: 1 }).sum; // 0
 */
export function differenceOfGaussians(options: DifferenceOfGaussiansOptions | number): Kernel {
  const where = "differenceOfGaussians";
  const given = asOptions<DifferenceOfGaussiansOptions>(where, options, "sigma");
  checkOptionNames(where, given, ["sigma", "ratio", "radius", "sampling"]);
  const sigma = checkedNumber(where, "sigma", given.sigma, sigmaRange);
  const ratio = checkedNumber(where, "ratio", given.ratio ?? 1.6, ratioRange);
  const radius = checkedNumber(where, "radius", given.radius ?? Math.ceil(4 * ratio * sigma), radiusRange);
  const sampling = chosenWord(where, "sampling", given.sampling ?? "point", ["point", "area"] as const);
  const side = 2 * radius + 1;
  const taps = new Float64Array(allowedTapCount(side, side));
  const narrow = gaussianTaps(sigma, radius, sampling);
  const wide = gaussianTaps(ratio * sigma, radius, sampling);
  for (let j = 0; j < side; j++) {
    for (let i = 0; i < side; i++) taps[j * side + i] = narrow[j]! * narrow[i]! - wide[j]! * wide[i]!;
  }
  return makeKernel(side, side, centreToSumZero(taps, radius * side + radius));
}
