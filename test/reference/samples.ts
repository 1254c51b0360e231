import type { SampleType, Samples } from "../../src/types.js";

/** The value that stands for all of a channel. */
export const fullValue: Record<SampleType, number> = { u8: 255, u16: 65535, f32: 1 };

export function sampleTypeOf(data: Samples): SampleType {
  if (data instanceof Float32Array) return "f32";
  return data instanceof Uint16Array ? "u16" : "u8";
}

/** How a result is written: integers as ⌊y + ½⌋, then clamped, NaN as 0; floats as they are (in single precision). */
export function written(y: number, sample: SampleType): number {
  if (sample === "f32") return Math.fround(y);
  if (Number.isNaN(y)) return 0;
  return Math.min(fullValue[sample], Math.max(0, Math.floor(y + 0.5)));
}

/**
 * sRGB decoding, continued past 1 by the same curve and odd below 0.
 *
 * Source   IEC 61966-2-1, as printed in CSS Color Module Level 4, sample code for colour conversions
 */
export function decoded(encodedValue: number): number {
  const magnitude = Math.abs(encodedValue);
  if (magnitude <= 0.04045) return encodedValue / 12.92;
  return Math.sign(encodedValue) * ((magnitude + 0.055) / 1.055) ** 2.4;
}

/** sRGB encoding, the inverse of `decoded`; same source. */
export function encoded(linearValue: number): number {
  const magnitude = Math.abs(linearValue);
  if (magnitude <= 0.0031308) return linearValue * 12.92;
  return Math.sign(linearValue) * (1.055 * magnitude ** (1 / 2.4) - 0.055);
}
