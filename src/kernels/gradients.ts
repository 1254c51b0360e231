import { outer } from "./fromTaps.js";
import type { Kernel } from "./kernel.js";
import { asOptions, checkOptionNames, chosenWord } from "./options.js";

/** `x`: how the image rises to the right. `y`: how it rises downwards. */
export type Axis = "x" | "y";

export interface GradientOptions {
  axis: Axis;
}

/**
 * Sobel's derivative mask, stored turned by 180° so that `convolve` gives the handbook's sign:
 * +8 on the ramp I(x, y) = x for `axis: "x"`, +8 on I(x, y) = y for `axis: "y"`. `scaled(…, 1 / 8)` makes it a slope per sample.
 *
 *     as laid on the image    x: −1 0 1    y: −1 −2 −1
 *                                −2 0 2        0  0  0
 *                                −1 0 1        1  2  1
 *
 * @param options a bare word is the axis
 * @throws ConvolutionError `unknown-option`, `unknown-value`
 * Source  Sobel & Feldman, 1968, as printed in the OpenVX 1.3.1 specification (Khronos), Sobel 3x3
 * @example
 * engine.convolve(image, sobel({ axis: "x" }), { output: { sample: "f32" } });
 */
export function sobel(options: GradientOptions | Axis): Kernel {
  return gradient("sobel", options, [1, 2, 1]);
}

/**
 * Prewitt's derivative mask, signed like `sobel`: +6 on the ramp.
 *
 *     as laid on the image    x: −1 0 1    y: −1 −1 −1
 *                                −1 0 1        0  0  0
 *                                −1 0 1        1  1  1
 *
 * @param options a bare word is the axis
 * @throws ConvolutionError `unknown-option`, `unknown-value`
 * Source  Prewitt, Object enhancement and extraction, in Picture Processing and Psychopictorics, 1970
 */
export function prewitt(options: GradientOptions | Axis): Kernel {
  return gradient("prewitt", options, [1, 1, 1]);
}

/**
 * Scharr's derivative mask, signed like `sobel`: +32 on the ramp. Its direction is off by at most 0.3° for waves down to 4 samples long.
 *
 *     as laid on the image    x:  −3 0  3    y: −3 −10 −3
 *                                −10 0 10        0   0  0
 *                                 −3 0  3        3  10  3
 *
 * @param options a bare word is the axis
 * @throws ConvolutionError `unknown-option`, `unknown-value`
 * Source  Scharr, Optimale Operatoren in der digitalen Bildverarbeitung, dissertation, Heidelberg, 2000
 */
export function scharr(options: GradientOptions | Axis): Kernel {
  return gradient("scharr", options, [3, 10, 3]);
}

function gradient(where: string, options: GradientOptions | Axis, across: readonly number[]): Kernel {
  const given = asOptions<GradientOptions>(where, options, "axis");
  checkOptionNames(where, given, ["axis"]);
  const axis = chosenWord(where, "axis", given.axis, ["x", "y"] as const);
  const along = [1, 0, -1];
  return axis === "x" ? outer(across, along) : outer(along, across);
}
