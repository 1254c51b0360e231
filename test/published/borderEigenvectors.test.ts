import { describe, expect, test } from "vitest";
import type { Border } from "../../src/index.js";
import { kernel, outer } from "../../src/kernels/index.js";
import { allAnswers } from "../support/answers.js";
import { difference } from "../support/publishedCase.js";
import type { Question } from "../support/questions.js";

/**
 * For a symmetric kernel with response H(ω) = Σ h[m] cos(m ω), each border rule returns one family of vectors unchanged but for a factor.
 *
 * Source   G. Strang, The discrete cosine transform, SIAM Review 41(1):135–147, 1999; S. A. Martucci, IEEE Trans. Signal Process. 42(5):1038–1051, 1994
 */
interface Family {
  border: Border;
  vector(n: number, k: number, count: number): number;
  angle(k: number, count: number): number;
}
const families: Family[] = [
  { border: "periodic", vector: (n, k, count) => Math.cos((2 * Math.PI * k * n) / count + 0.7), angle: (k, count) => (2 * Math.PI * k) / count },
  { border: "half-sample-symmetric", vector: (n, k, count) => Math.cos((Math.PI * k * (n + 0.5)) / count), angle: (k, count) => (Math.PI * k) / count },
  { border: "whole-sample-symmetric", vector: (n, k, count) => Math.cos((Math.PI * k * n) / (count - 1)), angle: (k, count) => (Math.PI * k) / (count - 1) },
];

/** Source   P. J. Burt, E. H. Adelson, The Laplacian pyramid as a compact image code, IEEE Trans. COM-31(4):532–540, 1983, a = 0.4 (from memory). */
const burtAdelson = [0.05, 0.25, 0.4, 0.25, 0.05];
const response = (taps: number[], angle: number): number => taps.reduce((sum, tap, m) => sum + tap * Math.cos((m - (taps.length - 1) / 2) * angle), 0);
const roundingOfInput = (taps: number[]): number => 2 ** -24 * (1 + taps.reduce((sum, tap) => sum + Math.abs(tap), 0));

function checkVector(question: Question, factor: number, vector: number[], taps: number[]): void {
  const expected = vector.map((value) => factor * value);
  // The vectors are rounded to single precision before they are filtered.
  for (const answer of allAnswers(question)) expect(difference(answer, expected, 1, roundingOfInput(taps))).toBeUndefined();
}

/** Printed to thirteen and ten decimals for N = 16. */
const printed: [border: string, k: number, factor: number][] = [
  ["half-sample-symmetric", 1, 0.9827805934527],
  ["whole-sample-symmetric", 1, 0.9804283461312],
  ["periodic", 1, 0.9326504443743],
  ["half-sample-symmetric", 7, 0.4051572078],
  ["whole-sample-symmetric", 7, 0.3544494716],
  ["periodic", 7, 0.0087709119],
];
test.each(printed)("%s, k = %i: factor %f", (border, k, factor) => {
  const family = families.find((candidate) => candidate.border === border)!;
  expect(response(burtAdelson, family.angle(k, 16))).toBeCloseTo(factor, 9);
});

describe.each(families.map((family) => [String(family.border), family] as const))("%s", (_, { border, vector, angle }) => {
  for (const count of [5, 16]) {
    test(`along a row and down a column of ${count}`, () => {
      for (let k = 0; k < count; k++) {
        const values = Array.from({ length: count }, (__, n) => vector(n, k, count));
        const factor = response(burtAdelson, angle(k, count));
        const data = Float32Array.from(values);
        checkVector({ image: { data, width: count, height: 1 }, kernel: kernel([burtAdelson]), options: { border } }, factor, values, burtAdelson);
        checkVector(
          { image: { data, width: 1, height: count }, kernel: kernel(burtAdelson.map((tap) => [tap])), options: { border } },
          factor,
          values,
          burtAdelson,
        );
      }
    });
  }

  test("in two dimensions as a product", () => {
    const [width, height, kx, ky] = [12, 9, 3, 2];
    const smooth = [0.25, 0.5, 0.25];
    const values = Array.from({ length: width * height }, (__, index) => vector(index % width, kx, width) * vector(Math.floor(index / width), ky, height));
    const factor = response(burtAdelson, angle(kx, width)) * response(smooth, angle(ky, height));
    const question: Question = { image: { data: Float32Array.from(values), width, height }, kernel: outer(smooth, burtAdelson), options: { border } };
    checkVector(question, factor, values, burtAdelson);
  });
});

test("zero, three taps: the sine vectors", () => {
  const taps = [0.25, 0.5, 0.25];
  const count = 11;
  for (let k = 1; k <= count; k++) {
    const values = Array.from({ length: count }, (_, n) => Math.sin((Math.PI * k * (n + 1)) / (count + 1)));
    const question: Question = { image: { data: Float32Array.from(values), width: count, height: 1 }, kernel: kernel([taps]), options: { border: "zero" } };
    checkVector(question, 0.5 + 0.5 * Math.cos((Math.PI * k) / (count + 1)), values, taps);
  }
});
