import { describe, expect, test } from "vitest";
import { gaussian, kernel, scaled, type Kernel } from "../../src/kernels/index.js";
import type { Method } from "../../src/types.js";
import { judge } from "../reference/agreement.js";
import { builds, engines } from "../support/engines.js";
import { noiseSamples } from "../support/noise.js";

const [width, height] = [31, 17];
const plain = noiseSamples("f32", width * height, 3) as Float32Array;
const images: Record<string, Float32Array> = {
  "a tenth of 10⁻⁴⁰": plain.map((value, k) => (k % 10 === 0 ? value * 1e-40 : value)),
  "all of 10⁻⁴⁰": plain.map((value) => value * 1e-40),
  "around 2⁻¹⁰⁰": plain.map((value, k) => value * 2 ** (-100 + (k % 5) - 2)),
};
/** Taps down to 10⁻³⁸ and below. */
const narrow = gaussian({ sigma: 0.8, radius: 11 });
const uneven = kernel(Array.from({ length: 5 }, (_, j) => Array.from({ length: 7 }, (__, i) => (i === 3 && j === 2 ? 0.9 : 10 ** (-2 - ((7 * j + i) % 40))))));
const methods: readonly [Method, Kernel][] = [
  ["direct", uneven],
  ["separable", narrow],
  ["fft", narrow],
  ["fft", uneven],
  ["direct", scaled(uneven, 1000)],
];

describe.each(builds)("%s", (build) => {
  test.each(Object.keys(images))("%s: samples and taps next to nothing may count as 0, within the bound", (name) => {
    const image = { data: images[name]!, width, height, channels: 1 as const };
    for (const [method, taps] of methods) {
      const filter = engines[build].prepare(taps, { width, height, channels: 1, sample: "f32" }, { method });
      const { errorBound } = filter.explanation;
      expect(judge(image, taps, { method }).disagreement(filter.run(image), errorBound)).toBeUndefined();
      // What is left out is next to nothing: the bound is that of rounding.
      expect(errorBound).toBeLessThan(1e-4 * taps.sum);
      filter.dispose();
    }
  });

  test("taps that are all small are kept: a gain undoes them", () => {
    const image = { data: plain, width, height, channels: 1 as const };
    const taps = scaled(gaussian({ sigma: 1, radius: 2 }), 2 ** -110);
    for (const method of ["direct", "separable"] as const) {
      const small = engines[build].convolve(image, taps, { method, output: { gain: 2 ** 100 } }).data;
      const expected = engines[build].convolve(image, scaled(taps, 2 ** 110), { method, output: { gain: 2 ** -10 } }).data;
      small.forEach((value, k) => expect(Math.abs(value - expected[k]!)).toBeLessThan(2 ** -24));
    }
  });
});
