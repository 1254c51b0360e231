import type { Layout, Raster } from "../src/types.js";
import { noiseSamples } from "../test/support/noise.js";

/** Images that a case takes in turns: no run finds the samples of the run before in the cache's nearest part. */
export const planeCount = 3;

/** Noise images of a layout, each from its own seed. */
export function planesOf({ width, height, channels = 1, sample = "u8" }: Layout, count = planeCount): Raster[] {
  return Array.from({ length: count }, (_, plane) => ({ data: noiseSamples(sample, width * height * channels, 17 + plane), width, height, channels }));
}
