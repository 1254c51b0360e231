import { ConvolutionError } from "../errors.js";
import { type Kernel, asKernel, makeKernel, readTaps } from "./kernel.js";
import { checkedNumber } from "./options.js";

/**
 * The kernel turned by 180°, its origin with it: `correlate(x, k)` is `convolve(x, reversed(k))`.
 *
 *     taps′[j, i] = taps[n − 1 − j, m − 1 − i],   origin′ = (m − 1 − origin.x, n − 1 − origin.y)
 *
 * @throws ConvolutionError `invalid-kernel` (not a kernel)
 */
export function reversed(given: Kernel): Kernel {
  const source = asKernel(given);
  const { width, height, origin } = source;
  return makeKernel(width, height, readTaps(source).slice().reverse(), { x: width - 1 - origin.x, y: height - 1 - origin.y });
}

/**
 * The kernel with every tap multiplied by a number.
 *
 * @throws ConvolutionError `invalid-number` (factor not finite), `invalid-kernel` (not a kernel; a tap leaves single precision)
 */
export function scaled(given: Kernel, factor: number): Kernel {
  const source = asKernel(given);
  const { width, height, origin } = source;
  const finiteFactor = checkedNumber("scaled", "the factor", factor, { what: "a finite number" });
  return makeKernel(
    width,
    height,
    Float64Array.from(readTaps(source), (tap) => tap * finiteFactor),
    origin,
  );
}

/**
 * The kernel divided by its sum, so that flat areas of an image keep their value. Equal taps stay equal.
 *
 * Accuracy  each tap within ½ ulp; the sum of non-negative taps within 1 ulp of 1
 * @throws ConvolutionError `invalid-kernel` (not a kernel; taps that cancel: |Σh| ≤ 10⁻⁹ Σ|h|)
 */
export function normalised(given: Kernel): Kernel {
  const source = asKernel(given);
  const { width, height, origin, sum } = source;
  const taps = readTaps(source);
  const weight = taps.reduce((total, tap) => total + Math.abs(tap), 0);
  if (Math.abs(sum) <= 1e-9 * weight) {
    const message = `The taps of the ${width}×${height} kernel sum to ${sum} and cannot be scaled to 1. Use scaled(kernel, factor) instead.`;
    throw new ConvolutionError("invalid-kernel", message, { expected: "a sum other than 0", received: sum });
  }
  return makeKernel(
    width,
    height,
    Float64Array.from(taps, (tap) => tap / sum),
    origin,
  );
}
