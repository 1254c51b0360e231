import type { Kernel } from "../../src/kernels/kernel.js";
import type { Channels, ConvolveOptions, Layout, Raster } from "../../src/types.js";
import { define } from "../reference/definition.js";
import { fullValue, sampleTypeOf } from "../reference/samples.js";

/** A problem as a user states it. */
export interface Question {
  image: Raster;
  kernel: Kernel;
  options?: ConvolveOptions;
  correlate?: boolean;
}

/** One answer to a question: the definition's own, or that of one method of one build. */
export interface Answer {
  from: string;
  data: ArrayLike<number>;
  width: number;
  height: number;
  channels: number;
  /** What the answer may be off, before rounding, in units of the output. */
  errorBound: number;
  /** Separable terms that were summed; 1 for every other method. */
  terms?: number;
}

/** The definition's answer, floats in double precision. */
export function definedAnswer({ image, kernel, options = {}, correlate = false }: Question): Answer {
  const { written, exact, width, height, channels, sample } = define(image, kernel, options, correlate);
  const largest = kernel.taps.reduce((total, tap) => total + Math.abs(tap), 0) * fullValue[sampleTypeOf(image.data)];
  const errorBound = (kernel.taps.length + 2) * 2 ** -53 * largest;
  return { from: "definition", data: sample === "f32" ? exact : written, width, height, channels, errorBound };
}

export function layoutOf(image: Raster): Required<Layout> {
  const { width, height } = image;
  return { width, height, channels: image.channels ?? ((image.data.length / (width * height)) as Channels), sample: sampleTypeOf(image.data) };
}

/** A one-channel image of floats from its rows. */
export function plane(rows: readonly (readonly number[])[]): Raster<Float32Array> {
  return { data: Float32Array.from(rows.flat()), width: rows[0]!.length, height: rows.length, channels: 1 };
}

/** A one-channel image of bytes from its rows. */
export function bytePlane(rows: readonly (readonly number[])[]): Raster<Uint8Array> {
  return { data: Uint8Array.from(rows.flat()), width: rows[0]!.length, height: rows.length, channels: 1 };
}
