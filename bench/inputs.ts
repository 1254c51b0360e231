import type { Layout, Raster } from "../src/index.js";
import { noise, noiseSamples } from "../test/support/noise.js";

/** Images that a case takes in turns: no run finds the samples of the run before in the cache's nearest part. */
export const planeCount = 3;

/** Noise images of a layout, each from its own seed. */
export function planesOf({ width, height, channels = 1, sample = "u8" }: Layout, count = planeCount): Raster[] {
  return Array.from({ length: count }, (_, plane) => ({ data: noiseSamples(sample, width * height * channels, 17 + plane), width, height, channels }));
}

/**
 * The same things in another order, the same for the same seed.
 *
 * Source    Durstenfeld, Algorithm 235: Random permutation, Comm. ACM 7(7): 420, 1964
 */
export function shuffled<T>(things: readonly T[], seed: number): T[] {
  const draw = noise(seed);
  const order = things.slice();
  for (let last = order.length - 1; last > 0; last -= 1) {
    const other = Math.floor(draw() * (last + 1));
    [order[last], order[other]] = [order[other]!, order[last]!];
  }
  return order;
}
