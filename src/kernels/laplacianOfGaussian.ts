import { exponential } from "../math/elementary/exponential.js";
import { allowedTapCount } from "./fromTaps.js";
import { type Kernel, makeKernel } from "./kernel.js";
import { type NumberRange, asOptions, checkOptionNames, checkedNumber } from "./options.js";
import { radiusRange } from "./sides.js";
import { centreToSumZero } from "./sums.js";

export interface LaplacianOfGaussianOptions {
  /** Standard deviation of the Gaussian in samples, 0.3…500. */
  sigma: number;
  /** Taps on each side of the middle. @defaultValue ⌈5 · sigma⌉ */
  radius?: number | undefined;
}

const sigmaRange: NumberRange = { what: "a number of samples, 0.3…500", least: 0.3, most: 500 };

/**
 * The Laplacian of a Gaussian: an edge lies where its result changes sign.
 *
 *     taps[y, x] = (x² + y² − q) / (2πσ⁶) · e^(−(x² + y²) / 2σ²),   −radius ≤ x, y ≤ radius
 *
 * q is 2σ² for the continuous function. Here it is the mean of x² + y² under the sampled bell, which is 2σ² but for what
 * sampling and cutting change, and makes the taps sum to nothing, so that flat areas give 0.
 *
 * Accuracy  the taps sum to exactly 0, in any order; they are symmetric to the last bit; q differs from 2σ² by less than
 *           2·10⁻⁵ of it for sigma ≥ 1 and the default radius
 * @param options a bare number is sigma
 * @throws ConvolutionError `unknown-option`, `invalid-number`, `invalid-kernel` (too many taps)
 * Source  Marr & Hildreth, Theory of edge detection, Proceedings of the Royal Society B 207, 1980
 * @example
 * laplacianOfGaussian({ sigma: 1.4 }).sum; // 0
 */
export function laplacianOfGaussian(options: LaplacianOfGaussianOptions | number): Kernel {
  const given = asOptions<LaplacianOfGaussianOptions>("laplacianOfGaussian", options, "sigma");
  checkOptionNames("laplacianOfGaussian", given, ["sigma", "radius"]);
  const sigma = checkedNumber("laplacianOfGaussian", "sigma", given.sigma, sigmaRange);
  const radius = checkedNumber("laplacianOfGaussian", "radius", given.radius ?? Math.ceil(5 * sigma), radiusRange);
  const side = 2 * radius + 1;
  const taps = new Float64Array(allowedTapCount(side, side));
  const bell = Float64Array.from({ length: radius + 1 }, (_, k) => exponential((-k * k) / (2 * sigma * sigma)));
  const meanSquare = 2 * meanSquareOffset(bell);
  const scale = 1 / (2 * Math.PI * sigma * sigma * sigma * sigma * sigma * sigma);
  for (let y = -radius; y <= radius; y++) {
    for (let x = -radius; x <= radius; x++) {
      const height = bell[Math.abs(y)]! * bell[Math.abs(x)]!;
      taps[(y + radius) * side + x + radius] = (x * x + y * y - meanSquare) * scale * height;
    }
  }
  return makeKernel(side, side, centreToSumZero(taps, radius * side + radius));
}

/** Σ k² · bell[|k|] / Σ bell[|k|] over −radius ≤ k ≤ radius. */
function meanSquareOffset(bell: Float64Array): number {
  let weighted = 0;
  let total = 0;
  for (let k = bell.length - 1; k > 0; k--) {
    weighted += 2 * k * k * bell[k]!;
    total += 2 * bell[k]!;
  }
  return weighted / (total + bell[0]!);
}
