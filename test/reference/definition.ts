import type { Kernel } from "../../src/kernels/kernel.js";
import type { Alpha, BorderRule, ConvolveOptions, Raster, SampleType } from "../../src/types.js";
import { resolve, rulesOfAxes } from "./border.js";
import { decoded, encoded, fullValue, sampleTypeOf, written } from "./samples.js";

/** The shape of a kernel is all that the definition needs. */
export type Taps = Pick<Kernel, "width" | "height" | "origin" | "taps">;

/** What the formula gives, in double precision. */
export interface Defined {
  width: number;
  height: number;
  channels: number;
  sample: SampleType;
  /** Each channel's sum h∗x of the values that are filtered (decoded, premultiplied), in units of the input. */
  sums: Float64Array;
  /** Results before rounding and clamping, in units of the output. */
  exact: Float64Array;
  /** Results as they are written. */
  written: Float64Array;
  /** By what each result's sum was multiplied, as a part of the kernel's weight lay outside: Σh / the weight inside, 1 elsewhere. */
  shares: Float64Array;
  /** 1 where the result depends on a sample that is not finite: such a result may be anything. */
  touched: Uint8Array;
  /** Largest magnitude of the values that are filtered, over the input's full value, at least 1. */
  magnitude: number;
  finish: Finish;
}

/** Everything that is decided before the first sample is read. */
export interface Setting {
  image: Raster;
  width: number;
  height: number;
  channels: number;
  /** Size and origin; `taps` is read once. */
  kernel: Taps;
  taps: Float64Array;
  correlate: boolean;
  rows: BorderRule;
  columns: BorderRule;
  alpha: Alpha;
  linear: boolean;
  input: SampleType;
  output: SampleType;
  gain: number;
  offset: number;
  /** Σh and Σ|h|. */
  sum: number;
  absoluteSum: number;
  /** Place in the image of result (0, 0), and the size of the result. */
  first: { row: number; column: number };
  result: { width: number; height: number };
}

/** From the sums of one pixel (and its kept alpha) to results before rounding. */
export type Finish = (sums: readonly number[], keptAlpha: number) => number[];

export function settingOf(image: Raster, kernel: Taps, options: ConvolveOptions = {}, correlate = false): Setting {
  const { width, height } = image;
  const channels = image.channels ?? image.data.length / (width * height);
  const { taps } = kernel;
  const sum = taps.reduce((total, tap) => total + tap, 0);
  const absoluteSum = taps.reduce((total, tap) => total + Math.abs(tap), 0);
  const hasAlpha = channels === 2 || channels === 4;
  const defaultAlpha = !hasAlpha ? "none" : Math.abs(sum) <= 1e-9 * absoluteSum ? "keep" : "straight";
  const input = sampleTypeOf(image.data);
  return {
    image,
    width,
    height,
    channels,
    kernel,
    taps,
    correlate,
    input,
    sum,
    absoluteSum,
    ...rulesOfAxes(options.border),
    alpha: options.alpha ?? defaultAlpha,
    linear: options.light === "linear",
    output: options.output?.sample ?? input,
    gain: options.output?.gain ?? 1,
    offset: options.output?.offset ?? 0,
    ...placed(width, height, kernel, options, correlate),
  };
}

/** Which places of the (endless) bordered image are results. */
function placed(width: number, height: number, kernel: Taps, options: ConvolveOptions, correlate: boolean): Pick<Setting, "first" | "result"> {
  const { width: m, height: n, origin } = kernel;
  // How far the taps reach to the left of (above) the result, and to the right (below).
  const left = correlate ? origin.x : m - 1 - origin.x;
  const above = correlate ? origin.y : n - 1 - origin.y;
  const right = m - 1 - left;
  const below = n - 1 - above;
  const whole = {
    same: { row: 0, column: 0, width, height },
    full: { row: -below, column: -right, width: width + m - 1, height: height + n - 1 },
    valid: { row: above, column: left, width: width - m + 1, height: height - n + 1 },
  }[options.extent ?? "same"];
  const region = options.region ?? { x: 0, y: 0, width: whole.width, height: whole.height };
  return {
    first: { row: whole.row + region.y, column: whole.column + region.x },
    result: { width: region.width, height: region.height },
  };
}

/** One pixel of the bordered image as it is filtered, or nothing where the border rule leaves it out. */
function workingPixel(setting: Setting, r: number, c: number): number[] | undefined {
  const row = resolve(r, setting.height, setting.rows);
  if (row.kind === "left-out") return undefined;
  if (row.kind === "constant") return working(setting, constantPixel(setting, row.value));
  const column = resolve(c, setting.width, setting.columns);
  if (column.kind === "left-out") return undefined;
  if (column.kind === "constant") return working(setting, constantPixel(setting, column.value));
  const { image, width, channels } = setting;
  const start = row.index * (image.stride ?? width * channels) + column.index * channels;
  return working(setting, Array.from(image.data.subarray(start, start + channels)));
}

function constantPixel(setting: Setting, value: number | readonly number[]): number[] {
  return Array.from({ length: setting.channels }, (_, channel) => (typeof value === "number" ? value : value[channel]!));
}

/** Decodes, then premultiplies. The alpha channel, where there is one, is the last. */
function working(setting: Setting, pixel: number[]): number[] {
  const full = fullValue[setting.input];
  const alphaChannel = setting.alpha === "none" ? -1 : setting.channels - 1;
  return pixel.map((sample, channel) => {
    if (channel === alphaChannel) return sample;
    const colour = setting.linear ? full * decoded(sample / full) : sample;
    return setting.alpha === "straight" ? colour * (pixel[alphaChannel]! / full) : colour;
  });
}

function finisher(setting: Setting): Finish {
  const { alpha, gain, offset, sum, linear } = setting;
  const fullIn = fullValue[setting.input];
  const fullOut = fullValue[setting.output];
  const light = (colour: number): number => (linear ? fullIn * encoded(colour / fullIn) : colour);
  const scaledColour = (colour: number): number => gain * colour + offset;
  if (alpha === "none") return (sums) => sums.map((value) => scaledColour(light(value)));
  return (sums, keptAlpha) => {
    const colours = sums.slice(0, -1);
    const alphaSum = sums[sums.length - 1]!;
    if (alpha === "keep") return [...colours.map((value) => scaledColour(light(value))), (keptAlpha / fullIn) * fullOut];
    if (alpha === "premultiplied") {
      const held = (colour: number): number => Math.max(0, Math.min(colour, alphaSum));
      return [...colours.map((value) => scaledColour(held(light(value)))), (alphaSum / fullIn) * fullOut];
    }
    const resultAlpha = (alphaSum / fullIn / sum) * fullOut;
    const nothingThere = !(written(resultAlpha, setting.output) > 0);
    const divided = (value: number): number => (sum * value) / (alphaSum / fullIn);
    return [...colours.map((value) => (nothingThere ? 0 : scaledColour(light(divided(value))))), resultAlpha];
  };
}

/** The bordered image as it is filtered, wherever the results reach. */
interface Surroundings {
  row: number;
  column: number;
  width: number;
  pixels: (number[] | undefined)[];
}

function surroundingsOf(setting: Setting): Surroundings {
  const { kernel, first, result } = setting;
  const row = first.row - kernel.height;
  const column = first.column - kernel.width;
  const width = result.width + 2 * kernel.width;
  const height = result.height + 2 * kernel.height;
  const pixels = Array.from({ length: width * height }, (_, place) => workingPixel(setting, row + Math.floor(place / width), column + (place % width)));
  return { row, column, width, pixels };
}

/**
 * The definition, as loops.
 *
 *     y[r, c] = Σⱼ Σᵢ h[j, i] · x[r − (j − oy), c − (i − ox)]     convolution
 *     z[r, c] = Σⱼ Σᵢ h[j, i] · x[r + (j − oy), c + (i − ox)]     correlation
 *
 * renormalised: Σh · (sum over the samples that are there) / (their taps' sum), 0 where that is 0.
 */
export function define(image: Raster, kernel: Taps, options: ConvolveOptions = {}, correlate = false): Defined {
  const setting = settingOf(image, kernel, options, correlate);
  const { channels, result, output } = setting;
  const around = surroundingsOf(setting);
  const finish = finisher(setting);
  const count = result.width * result.height * channels;
  const defined: Defined = {
    width: result.width,
    height: result.height,
    channels,
    sample: output,
    finish,
    sums: new Float64Array(count),
    exact: new Float64Array(count),
    written: new Float64Array(count),
    touched: new Uint8Array(count),
    shares: new Float64Array(count).fill(1),
    magnitude: magnitudeOf(around, fullValue[setting.input]),
  };
  for (let r = 0; r < result.height; r++) {
    for (let c = 0; c < result.width; c++) definePixel(setting, around, defined, r, c);
  }
  return defined;
}

function definePixel(setting: Setting, around: Surroundings, defined: Defined, r: number, c: number): void {
  const { kernel, taps, channels, first, result, alpha } = setting;
  const { width: m, height: n, origin } = kernel;
  const direction = setting.correlate ? 1 : -1;
  const sums: number[] = Array.from({ length: channels }, () => 0);
  const touched: boolean[] = Array.from({ length: channels }, () => false);
  let weightInside = 0;
  let everything = true;
  const pixelAt = (row: number, column: number): number[] | undefined => around.pixels[(row - around.row) * around.width + (column - around.column)];
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < m; i++) {
      const pixel = pixelAt(first.row + r + direction * (j - origin.y), first.column + c + direction * (i - origin.x));
      if (pixel === undefined) {
        everything = false;
        continue;
      }
      const tap = taps[j * m + i]!;
      weightInside += tap;
      for (let channel = 0; channel < channels; channel++) {
        sums[channel]! += tap * pixel[channel]!;
        if (!Number.isFinite(pixel[channel]!)) touched[channel] = true;
      }
    }
  }
  if (!everything) for (let channel = 0; channel < channels; channel++) sums[channel] = weightInside === 0 ? 0 : (setting.sum * sums[channel]!) / weightInside;
  // Alpha decides about colours where it is divided by or held to.
  if ((alpha === "straight" || alpha === "premultiplied") && touched[channels - 1]) touched.fill(true);
  const keptAlpha = pixelAt(first.row + r, first.column + c)?.[channels - 1] ?? 0;
  const exact = defined.finish(sums, keptAlpha);
  for (let channel = 0; channel < channels; channel++) {
    const index = (r * result.width + c) * channels + channel;
    defined.sums[index] = alpha === "keep" && channel === channels - 1 ? keptAlpha : sums[channel]!;
    defined.exact[index] = exact[channel]!;
    defined.written[index] = written(exact[channel]!, setting.output);
    defined.touched[index] = touched[channel] ? 1 : 0;
    if (!everything) defined.shares[index] = weightInside === 0 ? 0 : setting.sum / weightInside;
  }
}

function magnitudeOf(around: Surroundings, full: number): number {
  let largest = full;
  for (const pixel of around.pixels) {
    for (const value of pixel ?? []) if (Number.isFinite(value)) largest = Math.max(largest, Math.abs(value));
  }
  return largest / full;
}
