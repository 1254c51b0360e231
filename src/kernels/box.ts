import { allowedTapCount } from "./fromTaps.js";
import { type Kernel, type Origin, makeKernel } from "./kernel.js";
import { asOptions, checkOptionNames, checkedNumber } from "./options.js";
import { sideRange } from "./sides.js";

export interface BoxOptions {
  /** Columns. */
  width: number;
  /** Rows. @defaultValue `width` */
  height?: number | undefined;
  /** @defaultValue the middle */
  origin?: Origin | undefined;
}

/**
 * The mean of a rectangle. All taps are the same number, so that the engine can use running sums.
 *
 *     taps[j, i] = 1 / (width · height)
 *
 * Accuracy  the sum is within 1 ulp of 1
 * @param options a bare number is the side of a square
 * @throws ConvolutionError `unknown-option`, `invalid-number`, `invalid-origin`, `invalid-kernel` (too many taps)
 * @example
 * box({ width: 4, height: 1 }).taps; // [0.25, 0.25, 0.25, 0.25]
 */
export function box(options: BoxOptions | number): Kernel {
  const given = asOptions<BoxOptions>("box", options, "width");
  checkOptionNames("box", given, ["width", "height", "origin"]);
  const width = checkedNumber("box", "width", given.width, sideRange);
  const height = checkedNumber("box", "height", given.height ?? width, sideRange);
  const count = allowedTapCount(width, height);
  return makeKernel(width, height, new Float64Array(count).fill(1 / count), given.origin);
}
