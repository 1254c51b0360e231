import { kernel, outer } from "./fromTaps.js";
import { type GaussianOptions, gaussianVectors } from "./gaussian.js";
import { type Kernel, makeKernel, readTaps } from "./kernel.js";
import { type LaplacianStencil, laplacianRows } from "./laplacian.js";
import { type NumberRange, asOptions, checkOptionNames, checkedNumber } from "./options.js";
import { centreToSumOne } from "./sums.js";

export interface SharpenOptions {
  /** How much of the Laplacian is taken away, 0…1000. @defaultValue 1 */
  amount?: number | undefined;
  /** @defaultValue `"cross"` */
  stencil?: LaplacianStencil | undefined;
}

export interface UnsharpOptions extends GaussianOptions {
  /** How much of the difference from the blurred image is added, 0…1000. @defaultValue 1 */
  amount?: number | undefined;
}

const amountRange: NumberRange = { what: "a number, 0…1000", least: 0, most: 1000 };

/**
 * The image less its Laplacian: 3×3 taps that steepen edges and leave flat areas and even slopes alone.
 *
 *     taps = δ − amount · Laplacian,   sum 1
 *
 * @param options a bare number is the amount
 * @throws ConvolutionError `unknown-option`, `invalid-number`, `unknown-value` (stencil)
 * Source  Rosenfeld & Kak, Digital Picture Processing, chapter on enhancement (from memory)
 * @example
 * sharpen().taps; // [0, -1, 0, -1, 5, -1, 0, -1, 0]
 */
export function sharpen(options: SharpenOptions | number = {}): Kernel {
  const given = asOptions<SharpenOptions>("sharpen", options, "amount");
  checkOptionNames("sharpen", given, ["amount", "stencil"]);
  const amount = checkedNumber("sharpen", "amount", given.amount ?? 1, amountRange);
  return identityLess(kernel(laplacianRows("sharpen", given.stencil)), amount, 1);
}

/**
 * Unsharp masking: the image plus what a Gaussian blur takes from it.
 *
 *     taps = (1 + amount) · δ − amount · G,   sum 1
 *
 * @param options a bare number is the sigma of the blur
 * @throws ConvolutionError `unknown-option`, `invalid-number`, `unknown-value` (sampling), `invalid-kernel` (too many taps)
 * Source  common practice
 * @example
 * engine.convolve(image, unsharp({ sigma: 2, amount: 0.8 }));
 */
export function unsharp(options: UnsharpOptions | number): Kernel {
  const { amount: givenAmount, ...blur } = asOptions<UnsharpOptions>("unsharp", options, "sigma");
  checkOptionNames("unsharp", blur, ["sigma", "amount", "radius", "sampling"]);
  const amount = checkedNumber("unsharp", "amount", givenAmount ?? 1, amountRange);
  const { x, y } = gaussianVectors("unsharp", blur, ["sigma", "radius", "sampling"]);
  return identityLess(outer(y, x), amount, 1 + amount);
}

/** centreWeight · δ − amount · what, of odd sides and origin in the middle, with sum 1. */
function identityLess(what: Kernel, amount: number, centreWeight: number): Kernel {
  const { width, height, origin } = what;
  const taps = Float64Array.from(readTaps(what), (tap) => -amount * tap);
  const centre = origin.y * width + origin.x;
  taps[centre] = taps[centre]! + centreWeight;
  return makeKernel(width, height, centreToSumOne(taps, centre));
}
