import type { ConvolveOptions, Raster, Samples } from "../../src/types.js";
import { define, settingOf, type Defined, type Setting, type Taps } from "./definition.js";
import { fullValue, written } from "./samples.js";

/** Unit roundoff of single precision. */
const u = 2 ** -24;
/** Steps after the sums that round once each: quotient, Σh, curve in, curve out, gain, offset. */
const leaveRoundings = 6;

/** A result to be judged, and what it promised. */
export interface Promised {
  data: Samples;
  width: number;
  height: number;
  channels?: number;
}

export interface Judge {
  defined: Defined;
  /** The first result outside its bound, as a sentence; nothing where all are right. */
  disagreement(result: Promised, errorBound: number): string | undefined;
  /** Smallest and largest value before rounding that the bound allows for one result. */
  allowed(index: number, errorBound: number): [number, number];
}

/** Computes the definition once, to judge several methods by it. */
export function judge(image: Raster, kernel: Taps, options: ConvolveOptions = {}, correlate = false): Judge {
  const setting = settingOf(image, kernel, options, correlate);
  const defined = define(image, kernel, options, correlate);
  const allowed = (index: number, errorBound: number): [number, number] => allowedRange(setting, defined, index, errorBound);
  return { defined, allowed, disagreement: (result, errorBound) => firstDisagreement(defined, result, (index) => allowed(index, errorBound)) };
}

function firstDisagreement(defined: Defined, result: Promised, allowed: (index: number) => [number, number]): string | undefined {
  const { width, height, channels } = defined;
  if (result.width !== width || result.height !== height || result.data.length !== width * height * channels) {
    return `result is ${result.width}×${result.height} with ${result.data.length} samples, not ${width}×${height} with ${width * height * channels}`;
  }
  for (let index = 0; index < result.data.length; index++) {
    if (defined.touched[index]) continue;
    const [low, high] = allowed(index);
    const value = result.data[index]!;
    if (value >= written(low, defined.sample) && value <= written(high, defined.sample)) continue;
    const pixel = Math.floor(index / channels);
    const place = `row ${Math.floor(pixel / width)}, column ${pixel % width}, channel ${index % channels}`;
    return `${place}: got ${value}, exact ${defined.exact[index]}, allowed ${low} … ${high}`;
  }
  return undefined;
}

/**
 * The bound holds for the sums (premultiplied, linear); what follows is monotone in each of them, so its extremes lie at
 * the corners of the box that the bound draws around them.
 */
function allowedRange(setting: Setting, defined: Defined, index: number, errorBound: number): [number, number] {
  const { channels, alpha, gain, offset, kernel } = setting;
  const channel = index % channels;
  const start = index - channel;
  const full = fullValue[setting.input];
  const exact = defined.exact[index]!;
  // Contributions below 2⁻¹⁰⁰ of full value may be left out.
  const leftOut = kernel.width * kernel.height * 2 ** -100 * full * Math.max(1, defined.shares[index]!);
  const bound = errorBound * defined.magnitude + leftOut * Math.abs(gain);
  const plain = alpha === "none" || alpha === "keep";
  if (alpha === "keep" && channel === channels - 1) {
    // Kept alpha is only scaled from one type's full value to the other's: a quotient and a product; a float next to 0 is 0.
    const kept = 2 * u * Math.abs(exact) + (setting.input === "f32" ? 2 ** -100 * fullValue[setting.output] : 0);
    return [exact - kept, exact + kept];
  }
  // Taps that weigh next to nothing leave no finite bound (see checkQuestion): nothing is promised there.
  if (errorBound === Infinity || leftOut === Infinity) return [-Infinity, Infinity];
  if (plain && !setting.linear) return [exact - bound, exact + bound];
  // The gain does not touch alpha, whose bound is in its own output units.
  if (channel === channels - 1 && alpha !== "none") {
    const divisor = alpha === "straight" ? Math.abs(setting.sum) : 1;
    return alphaRange(setting, exact, errorBound * defined.magnitude + (leftOut / full / divisor) * fullValue[setting.output]);
  }
  const inSums = errorOfSums(setting, errorBound * defined.magnitude) + leftOut;
  const values = corners(setting, defined, start, channel, inSums);
  const rounding = leaveRoundings * u * Math.max(Math.abs(offset), ...values.map((value) => Math.abs(value - offset)));
  return [Math.min(...values) - rounding, Math.max(...values) + rounding];
}

/** The bound holds for colours, which the gain scales, and for filtered alpha, which goes to the output's full value: the smaller error of the sums. */
function errorOfSums({ alpha, gain, input, output, sum }: Setting, bound: number): number {
  const ofColours = gain === 0 ? Infinity : bound / Math.abs(gain);
  const alphaScale = fullValue[output] / fullValue[input] / (alpha === "straight" ? Math.abs(sum) : 1);
  const ofAlpha = alpha === "straight" || alpha === "premultiplied" ? bound / alphaScale : Infinity;
  const error = Math.min(ofColours, ofAlpha);
  return error === Infinity ? 0 : error;
}

/** Within the bound; and opaque, where what was computed may lie within its own bound of that. */
function alphaRange(setting: Setting, exact: number, bound: number): [number, number] {
  const rounding = leaveRoundings * u * Math.abs(exact);
  const opaque = fullValue[setting.output];
  const mayBeOpaque = setting.alpha === "straight" && Math.abs(exact - opaque) <= 2 * bound;
  const [low, high] = [exact - bound - rounding, exact + bound + rounding];
  return mayBeOpaque ? [Math.min(low, opaque), Math.max(high, opaque)] : [low, high];
}

/** The alpha, in output units, above which it is written as more than nothing: ½ rounds to 1. */
function leastWritten({ output }: Setting): number {
  return output === "f32" ? 0 : 0.5 + 2 ** -30;
}

function corners(setting: Setting, defined: Defined, start: number, channel: number, inSums: number): number[] {
  const { channels, alpha } = setting;
  const sums = Array.from(defined.sums.subarray(start, start + channels));
  const alphaSum = sums[channels - 1]!;
  const alphaSums = [alphaSum];
  if (alpha === "straight" || alpha === "premultiplied") alphaSums.push(alphaSum - inSums, alphaSum + inSums);
  // Within its own bound of Σh the quotient is exactly 1.
  const opaque = setting.sum * fullValue[setting.input];
  if (alpha === "straight" && Math.abs(alphaSum - opaque) <= 2 * inSums) alphaSums.push(opaque);
  // The quotient is largest where alpha is only just written, and unbounded for floats.
  const least = (opaque * leastWritten(setting)) / fullValue[setting.output];
  const between = Math.min(...alphaSums) <= least && least <= Math.max(...alphaSums);
  if (alpha === "straight" && between) alphaSums.push(least);
  const values: number[] = [];
  for (const otherAlpha of alphaSums) {
    for (const step of channel === channels - 1 && alpha !== "none" ? [0] : [-inSums, 0, inSums]) {
      const moved = sums.map((sum, other) => (other === channel ? sum + step : sum));
      if (alpha !== "none" && alpha !== "keep") moved[channels - 1] = otherAlpha;
      values.push(defined.finish(moved, alphaSum)[channel]!);
    }
  }
  if (alpha === "straight" && between && defined.sample === "f32") values.push(-Infinity, Infinity);
  return values;
}
