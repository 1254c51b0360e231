import { kernel } from "./fromTaps.js";
import type { Kernel } from "./kernel.js";
import { asOptions, checkOptionNames, chosenWord } from "./options.js";

/** Weights of the corners, the sides and the centre, and their common divisor. */
const stencils = {
  cross: { corner: 0, side: 1, centre: -4, divisor: 1 },
  square: { corner: 1, side: 1, centre: -8, divisor: 3 },
  diagonal: { corner: 1, side: 0, centre: -4, divisor: 2 },
  mehrstellen: { corner: 1, side: 4, centre: -20, divisor: 6 },
  "oono-puri": { corner: 1, side: 2, centre: -12, divisor: 4 },
} as const;

export type LaplacianStencil = keyof typeof stencils;

export interface LaplacianOptions {
  /** @defaultValue `"cross"` */
  stencil?: LaplacianStencil | undefined;
}

/** Weights of 1/3 and 1/6 are cut to this many steps, so that 20 of them are still a double without rounding. */
const steps = 1125899906842624;

/**
 * The Laplacian ∂²/∂x² + ∂²/∂y² on 3×3 samples. All five give 0 on planes and 4 on x² + y²; they differ in the fourth order.
 *
 *     cross        0  1 0    square      1  1 1      diagonal    1  0 1      mehrstellen  1   4 1      oono-puri  1   2 1
 *                  1 −4 1                1 −8 1 /3               0 −4 0 /2                4 −20 4 /6              2 −12 2 /4
 *                  0  1 0                1  1 1                  1  0 1                   1   4 1                 1   2 1
 *
 * `mehrstellen` has an error that is the same in all directions, and none on harmonic polynomials up to degree 7.
 *
 * Accuracy  taps within 2⁻⁴⁷ of themselves; they sum to exactly 0, in any order
 * @param options a bare word is the stencil
 * @throws ConvolutionError `unknown-option`, `unknown-value`
 * Source  Collatz, The Numerical Treatment of Differential Equations (mehrstellen); Patra & Karttunen, Numerical Methods for
 *         Partial Differential Equations 22, 2006; Oono & Puri, Physical Review Letters 58, 1987
 * @example
 * laplacian({ stencil: "mehrstellen" }).sum; // 0
 */
export function laplacian(options: LaplacianOptions | LaplacianStencil = {}): Kernel {
  const given = asOptions<LaplacianOptions>("laplacian", options, "stencil");
  checkOptionNames("laplacian", given, ["stencil"]);
  return kernel(laplacianRows("laplacian", given.stencil));
}

/**
 * The rows of a stencil.
 *
 * @throws ConvolutionError `unknown-value`
 */
export function laplacianRows(where: string, stencil: LaplacianStencil = "cross"): number[][] {
  const words = Object.keys(stencils) as LaplacianStencil[];
  const { corner, side, centre, divisor } = stencils[chosenWord(where, "stencil", stencil, words)];
  const unit = Math.floor(steps / divisor) / steps;
  const c = corner * unit;
  const s = side * unit;
  return [
    [c, s, c],
    [s, centre * unit, s],
    [c, s, c],
  ];
}
