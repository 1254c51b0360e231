import { largestTapCount } from "./kernel.js";
import { type NumberRange, checkOptionNames, checkedNumber } from "./options.js";

/** A number for both axes, or one each. */
export interface PerAxis {
  /** Along a row. */
  x: number;
  /** Down a column. */
  y: number;
}

export const sideRange: NumberRange = { what: `a whole number of taps, 1…${largestTapCount}`, least: 1, most: largestTapCount, whole: true };

/** Radii above this would make a square kernel of more taps than are supported. */
const largestRadius = 4095;

/**
 * One number for both axes, or `{ x, y }`.
 *
 * @throws ConvolutionError `invalid-number`, `unknown-option`
 */
export function perAxis(where: string, name: string, value: unknown, range: NumberRange): PerAxis {
  if (typeof value !== "object" || value === null) {
    const both = checkedNumber(where, name, value, range);
    return { x: both, y: both };
  }
  checkOptionNames(`${where}: ${name}`, value, ["x", "y"]);
  const { x, y } = value as Partial<PerAxis>;
  return { x: checkedNumber(where, `${name}.x`, x, range), y: checkedNumber(where, `${name}.y`, y, range) };
}

export const radiusRange: NumberRange = { what: `a whole number of taps on each side, 0…${largestRadius}`, least: 0, most: largestRadius, whole: true };

/** Standard deviations, in samples; 0 leaves an axis as it is. */
export const sigmaRange: NumberRange = { what: "a number of samples, 0…500", least: 0, most: 500 };
