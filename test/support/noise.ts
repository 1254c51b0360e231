import type { Samples, SampleType } from "../../src/types.js";

/**
 * The linear congruential generator of the ISO C standard's example `rand`: x ← 1103515245 · x + 12345 modulo 2³¹.
 * Its high bits are used; the same seed gives the same samples everywhere.
 */
export function noise(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(1103515245, state) + 12345) & 0x7fffffff;
    return (state >>> 8) / 2 ** 23;
  };
}

export const arrays = { u8: Uint8Array, u16: Uint16Array, f32: Float32Array };
const fullValues = { u8: 255, u16: 65535, f32: 1 };

/** Uniform samples over the whole range of a type; floats in 0…1. */
export function noiseSamples(sample: SampleType, count: number, seed: number): Samples {
  const next = noise(seed);
  for (let warm = 0; warm < 8; warm++) next();
  const values = new arrays[sample](count);
  for (let index = 0; index < count; index++) values[index] = sample === "f32" ? next() : Math.floor(next() * (fullValues[sample] + 1));
  return values;
}

/** A noise image. */
export function noiseImage(sample: SampleType, width: number, height: number, channels: 1 | 2 | 3 | 4 = 1, seed = 1) {
  return { data: noiseSamples(sample, width * height * channels, seed), width, height, channels };
}
