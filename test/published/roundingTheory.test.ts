import { describe, expect, test } from "vitest";
import { kernel, outer, scaled, type Kernel } from "../../src/kernels/index.js";
import { define } from "../reference/definition.js";
import { absoluteSum, largestDifference, ways } from "../support/methods.js";
import { noise, noiseImage } from "../support/noise.js";
import type { Question } from "../support/questions.js";

const u = 2 ** -24;

function positiveKernel(side: number, seed: number): Kernel {
  const next = noise(seed);
  for (let warm = 0; warm < 8; warm++) next();
  const taps = kernel(Array.from({ length: side }, () => Array.from({ length: side }, () => 0.1 + next())));
  return scaled(taps, 1 / taps.sum);
}

/**
 * Source   N. J. Higham, Accuracy and Stability of Numerical Algorithms, 2nd ed., §3.1: a sum of n products in any order is within
 *          γₙ Σ|h||x|, γₙ = n u / (1 − n u); one u more for each of the taps' own rounding and the result's (section numbers from memory).
 *          FFT: error O(u log N) in the norm, §24.1; that 2 log₂(N) u Σ|h| max|x| bounds single results as well is measured, not proved.
 */
describe("rounding errors stay within the theory of floating-point sums", () => {
  test.each([3, 5, 9, 15])("%i × %i taps on bytes", (side) => {
    const taps = positiveKernel(side, side);
    const question: Question = { image: noiseImage("u8", 96, 80, 1, 5), kernel: taps, options: { tolerance: 0, output: { sample: "f32" } } };
    const { exact } = define(question.image, taps, question.options);
    const scale = 255 * absoluteSum(taps.taps);
    for (const way of ways(question)) {
      const error = largestDifference(way.answer(question), exact);
      const roundings = { direct: side * side + 2, separable: way.terms * (2 * side + 4), "running-sum": 4, fft: 2 * Math.log2(256 * 256) }[way.method];
      if (way.method === "separable" && way.terms > 1) continue;
      expect(error, `${way.build} ${way.method}`).toBeLessThanOrEqual((roundings * u * scale) / (1 - roundings * u));
      // A promise that is never met is none: it may not lie below what was measured.
      expect(error, `${way.build} ${way.method}`).toBeLessThanOrEqual(way.errorBound);
    }
  });

  test("one separable term: m + n products in two passes", () => {
    const taps = scaled(outer([1, 3, 7, 3, 1], [1, 2, 5, 9, 5, 2, 1]), 1 / 375);
    const question: Question = { image: noiseImage("u16", 61, 40, 1, 9), kernel: taps, options: { output: { sample: "f32" } } };
    const { exact } = define(question.image, taps, question.options);
    for (const way of ways(question).filter(({ method }) => method === "separable")) {
      expect(way.terms).toBe(1);
      const roundings = 5 + 7 + 4;
      expect(largestDifference(way.answer(question), exact), way.build).toBeLessThanOrEqual(roundings * u * 65535 * absoluteSum(taps.taps));
    }
  });

  /** Σ|h| · 255 < 2²⁴: integers add up exactly in single precision, in any order (same source; the bound on Σ|h| is 65 793). */
  test("integer kernels of weight up to 65,793 are exact on bytes", () => {
    const heavy = kernel([[30_000, -5_793, 30_000]]);
    const question: Question = { image: noiseImage("u8", 64, 9, 1, 3), kernel: heavy, options: { output: { sample: "f32" } } };
    const { exact } = define(question.image, heavy, question.options);
    for (const way of ways(question).filter(({ method }) => method === "direct")) expect(largestDifference(way.answer(question), exact), way.build).toBe(0);
  });
});
