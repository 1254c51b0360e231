import { largestTapCount } from "./kernel.js";
import { type NumberRange, checkedNumber } from "./options.js";

/** A number for both axes, or one each. */
export interface PerAxis {
  /** Along a row. */
  x: number;
  /** Down a column. */
  y: number;
}

export const sideRange: NumberRange = { what: `a whole number of taps, 1…${largestTapCount}`, least: 1, most: largestTapCount, whole: true };

/** Radii above this would make a square kernel of more taps than are supported. */
export const largestRadius = 4095;

/**
 * One number for both axes, or `{ x, y }`.
 *
 * @throws ConvolutionError `invalid-number`
 */
export function perAxis(where: string, name: string, value: unknown, range: NumberRange): PerAxis {
  if (typeof value !== "object" || value === null) {
    const both = checkedNumber(where, name, value, range);
    return { x: both, y: both };
  }
  const { x, y } = value as Partial<PerAxis>;
  return { x: checkedNumber(where, `${name}.x`, x, range), y: checkedNumber(where, `${name}.y`, y, range) };
}
