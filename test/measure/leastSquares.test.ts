import { fcnnlsVector } from "ml-fcnnls";
import { describe, expect, test } from "vitest";
import { addRow, gramOf, inverseOf, nonNegativeSolution, type Gram } from "../../src/measure/leastSquares.js";
import { noise } from "../support/noise.js";

interface Problem {
  rows: number[][];
  times: number[];
}

/** Numbers −1 … 1. */
function signed(seed: number): () => number {
  const next = noise(seed);
  for (let warm = 0; warm < 8; warm++) next();
  return () => 2 * next() - 1;
}

/** More rows than columns, so that the columns are independent. Where all entries are positive, as counts are, many numbers of the solution are 0. */
function randomProblem(seed: number, columns: number, entry: (value: number) => number): Problem {
  const next = signed(seed);
  const rows = Array.from({ length: columns + 6 }, () => Array.from({ length: columns }, () => entry(next())));
  return { rows, times: rows.map(() => next() + 0.3) };
}

function normalEquations({ rows, times }: Problem): { gram: Gram; right: Float64Array } {
  const gram = gramOf(rows[0]!.length);
  const right = new Float64Array(gram.side);
  for (const [o, row] of rows.entries()) {
    addRow(gram, row, 1);
    for (const [k, value] of row.entries()) right[k]! += value * times[o]!;
  }
  return { gram, right };
}

const residual = ({ rows, times }: Problem, x: ArrayLike<number>): number =>
  Math.sqrt(rows.reduce((sum, row, o) => sum + (row.reduce((all, value, k) => all + value * x[k]!, 0) - times[o]!) ** 2, 0));

/**
 * Kuhn–Tucker: x ≥ 0, and the gradient b − A·x is 0 where x > 0 and not positive elsewhere.
 *
 * Source    Lawson & Hanson, Solving Least Squares Problems, (23.2)
 */
function expectOptimal({ side, values }: Gram, right: ArrayLike<number>, x: Float64Array): void {
  for (let i = 0; i < side; i++) {
    let [slope, magnitude] = [right[i]!, Math.abs(right[i]!)];
    for (let j = 0; j < side; j++) {
      slope -= values[i * side + j]! * x[j]!;
      magnitude += Math.abs(values[i * side + j]! * x[j]!);
    }
    // What enters must raise the gradient by 1e-9; the rest is rounding of the sums and of the factor.
    const allowed = 1e-9 + 1e4 * 2 ** -53 * magnitude;
    expect(x[i]).toBeGreaterThanOrEqual(0);
    expect(slope).toBeLessThanOrEqual(allowed);
    if (x[i]! > 0) expect(slope).toBeGreaterThanOrEqual(-allowed);
  }
}

const kinds = {
  "entries of both signs": (value: number) => value,
  "positive entries": Math.abs,
  "mostly zeros": (value: number) => (Math.abs(value) < 0.7 ? 0 : value),
} as const;

describe.each(Object.entries(kinds))("random problems with %s", (_, entry) => {
  test.each([1, 2, 5, 12, 30])("%i numbers: as the package ml-fcnnls, and Kuhn and Tucker agree", (columns) => {
    for (let seed = 1; seed <= 25; seed++) {
      const problem = randomProblem(97 * seed + columns, columns, entry);
      const { gram, right } = normalEquations(problem);
      const x = nonNegativeSolution(gram, right);
      expectOptimal(gram, right, x);
      const other = fcnnlsVector(problem.rows, problem.times, { gradientTolerance: 1e-11 }).K.to1DArray();
      expect(residual(problem, x)).toBeLessThanOrEqual(residual(problem, other) * (1 + 1e-9));
      // Equal residuals of independent columns: equal solutions. Columns of zeros alone are not independent, there any number does.
      for (const [k, value] of other.entries()) if (problem.rows.some((row) => row[k] !== 0)) expect(x[k]).toBeCloseTo(value, 5);
    }
  });
});

describe("degenerate problems", () => {
  const solve = (problem: Problem): Float64Array => {
    const { gram, right } = normalEquations(problem);
    const x = nonNegativeSolution(gram, right);
    expect([...x].every((value) => Number.isFinite(value) && value >= 0)).toBe(true);
    expectOptimal(gram, right, x);
    return x;
  };

  test("nothing is best where every number would have to be negative", () => {
    const { rows } = randomProblem(3, 6, Math.abs);
    expect([...solve({ rows, times: rows.map(() => -1) })]).toEqual([0, 0, 0, 0, 0, 0]);
  });

  test("and where all that is wanted is 0", () => {
    const { rows } = randomProblem(4, 6, (value) => value);
    expect([...solve({ rows, times: rows.map(() => 0) })]).toEqual([0, 0, 0, 0, 0, 0]);
  });

  test("a solution on the edge is found: a number that is 0 with or without the constraint", () => {
    const { rows } = randomProblem(5, 5, (value) => value);
    const wanted = [1, 0, 2, 0, 0.5];
    const x = solve({ rows, times: rows.map((row) => row.reduce((sum, value, k) => sum + value * wanted[k]!, 0)) });
    for (const [k, value] of wanted.entries()) expect(x[k]).toBeCloseTo(value, 8);
  });

  test("columns that are nearly the same, and columns of zeros", () => {
    for (let seed = 1; seed <= 40; seed++) {
      const { rows, times } = randomProblem(seed, 6, Math.abs);
      const next = signed(seed + 500);
      solve({ rows: rows.map((row) => [...row, row[0]! + 1e-5 * next(), row[3]!, 0]), times: times.map(Math.abs) });
    }
  });

  test("columns of very different size", () => {
    for (let seed = 1; seed <= 40; seed++) {
      const { rows, times } = randomProblem(seed, 8, Math.abs);
      solve({ rows: rows.map((row) => row.map((value, k) => value * 10 ** (k - 3))), times });
    }
  });

  test("more columns than rows, held together by a little of each number's square", () => {
    for (let seed = 1; seed <= 40; seed++) {
      const { rows, times } = randomProblem(seed, 4, Math.abs);
      const wide = rows.map((row, o) => [...row, ...row.map((value) => value * (1 + ((o * seed) % 7))), ...rows.map((_, k) => (k === o ? 1 : 0))]);
      const { gram, right } = normalEquations({ rows: wide, times });
      for (let k = 0; k < gram.side; k++) gram.values[k * gram.side + k]! += 1e-3;
      expectOptimal(gram, right, nonNegativeSolution(gram, right));
    }
  });
});

test("the inverse of a positive definite matrix times the matrix is 1 on the diagonal and 0 elsewhere", () => {
  for (let seed = 1; seed <= 10; seed++) {
    const { gram } = normalEquations(randomProblem(seed, 9, (value) => value));
    const { side } = gram;
    const inverse = inverseOf(gram);
    for (let i = 0; i < side; i++) {
      for (let j = 0; j < side; j++) {
        let sum = 0;
        for (let k = 0; k < side; k++) sum += gram.values[i * side + k]! * inverse.values[k * side + j]!;
        expect(sum).toBeCloseTo(i === j ? 1 : 0, 8);
      }
    }
  }
});
