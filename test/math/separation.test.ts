import { describe, expect, test } from "vitest";
import { leastLeftBy, separate } from "../../src/math/separation.js";
import { noise } from "../support/noise.js";

const draw = noise(41);

const matrix = (rows: number, columns: number, at: (j: number, i: number) => number): Float64Array =>
  Float64Array.from({ length: rows * columns }, (_, k) => at(Math.floor(k / columns), k % columns));

/** Σ of so many outer products of random vectors, and a little more. */
function ofRank(rank: number, rows: number, columns: number, more = 0): Float64Array {
  const vectors = Array.from({ length: rank }, () => [Array.from({ length: rows }, () => draw() - 0.5), Array.from({ length: columns }, () => draw() - 0.5)]);
  return matrix(rows, columns, (j, i) => vectors.reduce((sum, [column, row]) => sum + column![j]! * row![i]!, more * (draw() - 0.5)));
}

describe("what any sum of separable terms leaves at least", () => {
  test.each([
    [1, 9, 9],
    [3, 21, 40],
    [16, 255, 255],
  ])("is above 0 for a matrix without structure, and never above what %i terms do leave", (terms, rows, columns) => {
    for (let k = 0; k < 10; k++) {
      const taps = ofRank(Math.min(rows, columns), rows, columns);
      const least = leastLeftBy(terms, taps, rows, columns);
      expect(least).toBeGreaterThan(0);
      expect(least).toBeLessThanOrEqual(separate(taps, rows, columns, terms).residuals[terms]!);
    }
  });

  test("is no more than the noise on a matrix of that rank", () => {
    for (const more of [1e-3, 1e-6, 1e-9]) {
      const clean = ofRank(16, 40, 60);
      const noisy = clean.map((value) => value + more * (draw() - 0.5));
      const left = noisy.reduce((sum, value, k) => sum + Math.abs(value - clean[k]!), 0);
      expect(leastLeftBy(16, noisy, 40, 60)).toBeLessThanOrEqual(left);
    }
  });

  test("the diagonal matrix of Eckart and Young: the smallest of its numbers, as all but one can be taken away", () => {
    const numbers = [5, 4, 3, 2, 1];
    expect(
      leastLeftBy(
        4,
        matrix(5, 5, (j, i) => (i === j ? numbers[j]! : 0)),
        5,
        5,
      ),
    ).toBeLessThanOrEqual(1);
    expect(
      leastLeftBy(
        4,
        matrix(5, 5, (j, i) => (i === j ? numbers[j]! : 0)),
        5,
        5,
      ),
    ).toBeCloseTo(1 / Math.hypot(...numbers.map((value) => 1 / value)), 12);
  });

  test.each([
    ["zeros", matrix(20, 20, () => 0), 20, 20],
    ["one outer product", ofRank(1, 30, 30), 30, 30],
    ["a smaller matrix than terms", ofRank(5, 5, 5), 5, 5],
  ])("is nothing for %s", (_, taps, rows, columns) => {
    expect(leastLeftBy(16, taps, rows, columns)).toBeLessThan(1e-9);
  });
});
