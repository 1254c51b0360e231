import { describe, expect, test } from "vitest";
import { box } from "../../src/kernels/index.js";
import type { Border, Channels } from "../../src/types.js";
import { builds, engines } from "../support/engines.js";
import { noiseSamples } from "../support/noise.js";

/** Around the places where column sums outgrow 16 bits and scaling needs a remainder. */
const sides = [
  [1, 1],
  [2, 2],
  [16, 1],
  [9, 9],
  [4, 7],
  [31, 31],
  [64, 64],
  [3, 128],
  [3, 129],
  [101, 101],
  [181, 120],
] as const;
const borders: readonly Border[] = [
  "replicate",
  "zero",
  "periodic",
  "half-sample-symmetric",
  { constant: 17 },
  { rows: { constant: 9 }, columns: { constant: 200 } },
];

describe.each(builds)("%s", (build) => {
  test.each(sides)("a box of %i × %i gives the mean of bytes, rounded half up, at every border", (width, height) => {
    const engine = engines[build];
    const kernel = box({ width, height });
    const count = width * height;
    for (const channels of [1, 2, 3, 4] as const satisfies readonly Channels[]) {
      for (const [columns, rows] of [
        [37, 23],
        [5, 4],
        [16, 8],
      ] as const) {
        const image = { data: noiseSamples("u8", columns * rows * channels, count + columns), width: columns, height: rows, channels };
        for (const border of borders) {
          const options = { method: "running-sum", alpha: "none", border } as const;
          const means = engine.convolve(image, kernel, options).data;
          // Sums below 2²⁴, times a gain that undoes the tap but for its rounding.
          const sums = Array.from(engine.convolve(image, kernel, { ...options, output: { sample: "f32", gain: count } }).data, Math.round);
          expect(Array.from(means)).toEqual(sums.map((sum) => Math.floor((2 * sum + count) / (2 * count))));
        }
      }
    }
  });
});

test("alpha that is kept stays beside the means of colours", () => {
  const image = { data: noiseSamples("u8", 4 * 33 * 9, 5), width: 33, height: 9, channels: 4 as const };
  for (const build of builds) {
    const options = { method: "running-sum", border: "periodic" } as const;
    const kept = engines[build].convolve(image, box(5), { ...options, alpha: "keep" }).data;
    const all = engines[build].convolve(image, box(5), { ...options, alpha: "none" }).data;
    kept.forEach((value, k) => expect(value).toBe(k % 4 === 3 ? image.data[k] : all[k]));
  }
});
