import { expect, test } from "vitest";
import { kernel, outer, type Kernel } from "../../src/kernels/index.js";
import { define } from "../reference/definition.js";
import { ways, type Way } from "../support/methods.js";
import { noise, noiseImage } from "../support/noise.js";
import type { Question } from "../support/questions.js";

/**
 * Methods whose partial sums are all integers. The FFT's results are rounded to the integers that they must be where its bound tells them
 * apart; a sum of several separable terms has partial sums that are none.
 */
function exactWays(question: Question): Way[] {
  return ways(question).filter(({ method, errorBound, terms }) => (method === "fft" ? errorBound < 0.5 : terms === 1));
}

function integerKernel(width: number, height: number, seed: number): Kernel {
  const next = noise(seed);
  return kernel(Array.from({ length: height }, () => Array.from({ length: width }, () => Math.floor(9 * next()) - 4)));
}

/** Integer taps: every partial sum is an integer below 2²⁴, exact in single precision in any order. */
const integerKernels: [name: string, kernel: Kernel][] = [
  ["Sobel", outer([1, 2, 1], [1, 0, -1])],
  ["binomial 5 × 5", outer([1, 4, 6, 4, 1], [1, 4, 6, 4, 1])],
  ["box of ones 9 × 9", outer([1, 1, 1, 1, 1, 1, 1, 1, 1], [1, 1, 1, 1, 1, 1, 1, 1, 1])],
  ["5 × 4 of no structure", integerKernel(5, 4, 3)],
  ["13 × 15 of no structure", integerKernel(13, 15, 4)],
];

test.each(integerKernels)("integer taps on bytes give exact integers: %s", (_, taps) => {
  for (const channels of [1, 3] as const) {
    for (const border of ["replicate", "periodic", { constant: 7 }] as const) {
      const question: Question = { image: noiseImage("u8", 38, 29, channels, 2), kernel: taps, options: { border, output: { sample: "f32" } } };
      const { exact } = define(question.image, taps, question.options);
      for (const way of exactWays(question)) {
        expect(Array.from(way.answer(question)), `${way.build} ${way.method}`).toEqual(Array.from(exact));
      }
    }
  }
});

test("small integer taps on 16-bit samples give exact integers", () => {
  const question: Question = { image: noiseImage("u16", 33, 21, 1, 6), kernel: outer([1, 2, 1], [1, 2, 1]), options: { output: { sample: "f32" } } };
  const { exact } = define(question.image, question.kernel, question.options);
  for (const way of exactWays(question)) {
    expect(Array.from(way.answer(question)), `${way.build} ${way.method}`).toEqual(Array.from(exact));
  }
});

test("a box of 256 × 256 ones on white bytes is exact", () => {
  const ones = Array.from({ length: 256 }, () => 1);
  const image = { data: new Uint8Array(64 * 5).fill(255), width: 64, height: 5, channels: 1 as const };
  const question: Question = { image, kernel: outer(ones, ones), options: { output: { sample: "f32" } } };
  for (const way of exactWays(question)) {
    expect(new Set(way.answer(question)), `${way.build} ${way.method}`).toEqual(new Set([255 * 65536]));
  }
});
