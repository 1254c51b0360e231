import { expect, test } from "vitest";
import { kernel, scaled } from "../../src/kernels/index.js";
import { allAnswers } from "../support/answers.js";
import { difference } from "../support/publishedCase.js";
import type { Question } from "../support/questions.js";
import { exampleImage } from "./cases/w3cFilterEffects.js";

/**
 * Premultiplied c = C · α, and back C = c / α, 0 where α is 0.
 *
 * Source   W3C, Compositing and Blending Level 1, simple alpha compositing
 */
test("the mean of half-covering blue and covering red is two thirds red, one third blue, covering three quarters", () => {
  const image = { data: Float32Array.of(0, 0, 1, 0.5, 1, 0, 0, 1), width: 2, height: 1, channels: 4 as const };
  const question: Question = { image, kernel: kernel([[0.5, 0.5]]), options: { alpha: "straight", border: "periodic" } };
  const pixel = [2 / 3, 0, 1 / 3, 0.75];
  // The bound holds for premultiplied values; the division by ¾ enlarges it by 4/3, and its dividend's and divisor's errors add.
  for (const answer of allAnswers(question))
    expect(difference({ ...answer, errorBound: (8 / 3) * answer.errorBound + 2 ** -24 }, [...pixel, ...pixel])).toBeUndefined();
});

/**
 * Filtering what is known and dividing by what was known: (a ∗ (c · f)) / (a ∗ c), with certainty c as alpha.
 *
 * Source   H. Knutsson, C.-F. Westin, Normalized and differential convolution, CVPR 1993, pp. 515–523 (the formula; the numbers follow exactly)
 */
test("normalised convolution fills gaps", () => {
  const known = [3, null, null, 6, null, 9, null, null, null, 3];
  const data = Float32Array.from(known.flatMap((value) => (value === null ? [777, 0] : [value, 1])));
  const image = { data, width: 10, height: 1, channels: 2 as const };
  const question: Question = { image, kernel: scaled(kernel([[1, 2, 3, 2, 1]]), 1 / 9), options: { alpha: "straight", border: "zero" } };
  const filled = [3, 4, 5, 6.75, 7.5, 8.25, 9, 6, 3, 3];
  // Coverage is at least 1/9 everywhere, and values are 9 at most.
  for (const answer of allAnswers(question)) {
    const colours = filled.map((_, index) => answer.data[2 * index]!);
    const bound = 9 * answer.errorBound * (9 + 9) + 9 * 2 ** -23;
    expect(difference({ ...answer, channels: 1, data: colours, errorBound: bound }, filled)).toBeUndefined();
  }
});

/**
 * The example image of W3C Filter Effects with alpha by columns, kernel 1 … 9, edgeMode duplicate, preserveAlpha false: all channels are
 * filtered premultiplied. Values from the printed formula, two decimals.
 */
test("feConvolveMatrix on partly transparent pixels", () => {
  const alphas = [255, 128, 64, 0, 255];
  const data = Uint8Array.from(exampleImage.flatMap((row) => row.flatMap((colour, x) => [colour, alphas[x]!])));
  const image = { data, width: 5, height: 5, channels: 2 as const };
  const oneToNine = scaled(
    kernel([
      [1, 2, 3],
      [4, 5, 6],
      [7, 8, 9],
    ]),
    1 / 45,
  );
  const expectedAlpha = [221.13, 161.73, 72.53, 93.6, 153];
  const expectedColour = [17.19, 24.41, 41.57, 186.23, 235];
  for (const { from, data: result, errorBound } of allAnswers({ image, kernel: oneToNine, options: { output: { sample: "f32" } } })) {
    for (let x = 0; x < 5; x++) {
      const coverage = expectedAlpha[x]! / 255;
      expect(Math.abs(255 * result[2 * x + 1]! - expectedAlpha[x]!), `${from} alpha ${x}`).toBeLessThanOrEqual(0.005 + errorBound);
      expect(Math.abs(result[2 * x]! - expectedColour[x]!), `${from} colour ${x}`).toBeLessThanOrEqual(0.005 + (2 * errorBound) / coverage);
    }
  }
});
