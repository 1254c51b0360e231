import { type Kernel, type Origin, makeKernel } from "./kernel.js";
import { asOptions, checkOptionNames, checkedNumber } from "./options.js";
import { allowedTapCount } from "./fromTaps.js";
import { sideRange } from "./sides.js";

export interface DeltaOptions {
  /** @defaultValue 1 */
  width?: number | undefined;
  /** @defaultValue `width` */
  height?: number | undefined;
  /** @defaultValue the middle */
  origin?: Origin | undefined;
  /** Where the 1 is. @defaultValue the origin, which leaves an image as it is */
  position?: Origin | undefined;
}

/**
 * A single 1 among zeros. Convolution with it shifts the image by `position − origin` (right and down); the default changes nothing.
 *
 *     taps[j, i] = 1 at position, 0 elsewhere
 *
 * @throws ConvolutionError `unknown-option`, `invalid-number`, `invalid-origin` (origin or position outside), `invalid-kernel` (too many taps)
 * @example
 * const shift = delta({ width: 5, height: 1, position: { x: 4, y: 0 } });
 * shift.taps; // [0, 0, 0, 0, 1]
 * engine.convolve(image, shift); // two samples to the right
 */
export function delta(options: DeltaOptions | number = {}): Kernel {
  const given = asOptions<DeltaOptions>("delta", options, "width");
  checkOptionNames("delta", given, ["width", "height", "origin", "position"]);
  const width = checkedNumber("delta", "width", given.width ?? 1, sideRange);
  const height = checkedNumber("delta", "height", given.height ?? width, sideRange);
  const blank = makeKernel(width, height, new Float64Array(allowedTapCount(width, height)), given.origin);
  const { x, y } = given.position === undefined ? blank.origin : makeKernel(width, height, blank.taps, given.position).origin;
  const taps = blank.taps;
  taps[y * width + x] = 1;
  return makeKernel(width, height, taps, blank.origin);
}
