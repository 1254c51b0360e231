import { allowedTapCount } from "./fromTaps.js";
import { compensatedSum } from "../math/compensatedSum.js";
import { diskCoverage } from "../math/diskCoverage.js";
import { type Kernel, makeKernel } from "./kernel.js";
import { type NumberRange, asOptions, checkOptionNames, checkedNumber, chosenWord } from "./options.js";
import { centreToSumOne } from "./sums.js";

export interface DiskOptions {
  /** In samples, above 0, at most 4095. */
  radius: number;
  /** `area`: how much of each sample's square the disk covers. `point`: whether it covers the sample's middle. @defaultValue `"area"` */
  sampling?: "area" | "point" | undefined;
}

const radiusRange: NumberRange = { what: "a number of samples above 0, at most 4095", above: 0, most: 4095 };

/**
 * The mean of a disk: how a lens without aberrations blurs what is out of focus.
 *
 *     area    taps[y, x] ∝ area of {(s, t): s² + t² ≤ radius²} within |s − x| ≤ ½, |t − y| ≤ ½,   sum 1
 *     point   taps[y, x] ∝ 1 where x² + y² ≤ radius², else 0,   sum 1
 *
 * Accuracy  areas within max(1, radius) · 2⁻⁵¹ of a square before they are divided by the sum; the taps have all symmetries of the square, to the last bit
 * @param options a bare number is the radius
 * @throws ConvolutionError `unknown-option`, `invalid-number`, `unknown-value`, `invalid-kernel` (too many taps)
 * Source  geometric optics; common practice
 * @example
 * disk({ radius: 2.5 }).width; // 5
 */
export function disk(options: DiskOptions | number): Kernel {
  const given = asOptions<DiskOptions>("disk", options, "radius");
  checkOptionNames("disk", given, ["radius", "sampling"]);
  const radius = checkedNumber("disk", "radius", given.radius, radiusRange);
  const sampling = chosenWord("disk", "sampling", given.sampling ?? "area", ["area", "point"] as const);
  const reach = sampling === "area" ? Math.max(0, Math.ceil(radius - 0.5)) : Math.floor(radius);
  const side = 2 * reach + 1;
  const taps = new Float64Array(allowedTapCount(side, side));
  for (let y = 0; y <= reach; y++) {
    for (let x = y; x <= reach; x++) {
      const weight = sampling === "area" ? diskCoverage(x, y, radius) : Number(x * x + y * y <= radius * radius);
      for (const column of [reach - x, reach + x]) {
        for (const row of [reach - y, reach + y]) taps[row * side + column] = taps[column * side + row] = weight;
      }
    }
  }
  const total = compensatedSum(taps);
  for (let k = 0; k < taps.length; k++) taps[k] = taps[k]! / total;
  return makeKernel(side, side, sampling === "area" ? centreToSumOne(taps, reach * side + reach) : taps);
}
