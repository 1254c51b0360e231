import { outer } from "./fromTaps.js";
import type { Kernel } from "./kernel.js";
import { type NumberRange, asOptions, checkOptionNames } from "./options.js";
import { centreToSumOne } from "./sums.js";
import { type PerAxis, perAxis } from "./sides.js";

export interface BinomialOptions {
  /** n of the row of Pascal's triangle, n + 1 taps, 0…1000; one number for both axes or `{ x, y }`. */
  order: number | PerAxis;
}

const orderRange: NumberRange = { what: "a whole number, 0…1000", least: 0, most: 1000, whole: true };

/**
 * Smooths by rows of Pascal's triangle: the Gaussian's exact relative among short kernels, variance order / 4 on each axis.
 *
 *     taps = b(order.y) · b(order.x)ᵀ,   b(n)[k] = C(n, k) / 2ⁿ,   0 ≤ k ≤ n
 *
 * Accuracy  exact up to order 56; above, each tap is within ½ ulp, the middle one takes what rounding left, less than 2⁻⁵²; the sum is 1 within 1 ulp
 * @param options a bare number is the order on both axes
 * @throws ConvolutionError `unknown-option`, `invalid-number`
 * @example
 * scaled(binomial(2), 16).taps; // [1, 2, 1, 2, 4, 2, 1, 2, 1]
 * scaled(binomial({ order: { x: 4, y: 0 } }), 16).taps; // [1, 4, 6, 4, 1]
 */
export function binomial(options: BinomialOptions | number): Kernel {
  const given = asOptions<BinomialOptions>("binomial", options, "order");
  checkOptionNames("binomial", given, ["order"]);
  const order = perAxis("binomial", "order", given.order, orderRange);
  return outer(binomialRow(order.y), binomialRow(order.x));
}

/** C(n, k) / 2ⁿ in whole numbers, rounded once each; the middle tap of odd counts takes what rounding left. */
function binomialRow(order: number): Float64Array<ArrayBuffer> {
  let power = 1;
  for (let n = 0; n < order; n++) power *= 0.5;
  const taps = new Float64Array(order + 1);
  let coefficient = 1n;
  for (let k = 0; k <= order; k++) {
    taps[k] = Number(coefficient) * power;
    coefficient = (coefficient * BigInt(order - k)) / BigInt(k + 1);
  }
  return order % 2 === 0 ? centreToSumOne(taps, order / 2) : taps;
}
