import { expect, test } from "vitest";
import { box, createEngine, gaussian, type BorderRule, type ConvolveOptions, type Method } from "../../src/index.js";
import { builds, engines } from "../support/engines.js";
import { noiseKernel } from "../support/kernels.js";
import { firstDifference, largestDifference } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import { layoutOf } from "../support/questions.js";

/** Wide enough to be cut several times when memory is short. */
const width = 1500;
const pageBytes = 65536;
const rules: BorderRule[] = ["replicate", "zero", "periodic", "half-sample-symmetric", "whole-sample-symmetric", { constant: 7 }];
const cases: readonly [Method, ReturnType<typeof gaussian>][] = [
  ["direct", noiseKernel(9, 5, 1, { x: 1, y: 4 })],
  ["separable", gaussian({ sigma: 3, radius: 6 })],
  ["running-sum", box({ width: 31, height: 7 })],
  ["fft", noiseKernel(21, 13, 2)],
];
const optionSets: readonly [string, "u8" | "u16" | "f32", ConvolveOptions][] = [
  ...rules.map((border): [string, "u8", ConvolveOptions] => [JSON.stringify(border), "u8", { border }]),
  ["full, alpha kept", "u8", { extent: "full", alpha: "keep", border: { rows: "zero", columns: "periodic" } }],
  ["valid, a region, linear light", "u8", { extent: "valid", region: { x: 11, y: 2, width: 1401, height: 9 }, light: "linear" }],
  ["floats", "f32", { border: "whole-sample-symmetric", alpha: "none" }],
];

/** Error bounds hold for samples up to 1, and in proportion beyond. */
const largest = (samples: ArrayLike<number>): number => Array.from(samples).reduce((most, x) => Math.max(most, Math.abs(x)), 1);

/** Whether the engine with little memory had to cut is told by what it takes. */
test.each(optionSets)("panel by panel, in a third of the memory, the samples are those of the whole: %s", async (_, sample, options) => {
  let cut = 0;
  for (const build of builds) {
    for (const [method, kernel] of cases) {
      const image = noiseImage(sample, width, 24, 4, 31);
      const asked = { ...options, method };
      const whole = engines[build].explain(kernel, layoutOf(image), asked);
      const limited = await createEngine({ build, memoryLimit: Math.max(pageBytes, Math.ceil(0.35 * whole.bytes)) });
      const panels = limited.explain(kernel, layoutOf(image), asked);
      const [found, expected] = [limited, engines[build]].map((engine) => engine.convolve(image, kernel, asked).data) as [Float32Array, Float32Array];
      if (panels.bytes < whole.bytes) cut++;
      if (method !== "fft") expect(firstDifference(found, expected), `${build} ${method}`).toBeUndefined();
      else if (sample === "f32") expect(largestDifference(found, expected)).toBeLessThanOrEqual(largest(image.data) * (whole.errorBound + panels.errorBound));
      else expect(largestDifference(found, expected), `${build} ${method}`).toBeLessThanOrEqual(1);
      limited.dispose();
    }
  }
  expect(cut).toBe(builds.length * cases.length);
});

test("memory does not grow with the width of an image", () => {
  for (const [method, kernel] of cases) {
    const bytes = [1_000_000, 8_000_000].map((columns) => engines.simd.explain(kernel, { width: columns, height: 4, channels: 4 }, { method }).bytes);
    for (const each of bytes) expect(each, method).toBeLessThanOrEqual(64 * 1_048_576);
  }
});
