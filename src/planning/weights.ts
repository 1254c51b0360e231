import { correlationTaps, type Axis, type Problem } from "./problem.js";

/**
 * The renormalised border: each result is divided by the part of the kernel's weight that fell inside, times Σh. The part depends only
 * on which rows and which columns of taps are left out, so there are few different ones: a table by row pattern and column pattern.
 */
export interface Weights {
  /** Row pattern of each result row, column pattern of each result column. */
  rows: Int32Array<ArrayBuffer>;
  columns: Int32Array<ArrayBuffer>;
  /** Column patterns to a row of the table. */
  stride: number;
  /** Σh ÷ inside weight, 0 where nothing is inside. */
  factors: Float32Array<ArrayBuffer>;
  /** The smallest inside weight that is not 0. */
  smallest: number;
}

/** Taps before … after − 1 lie on samples inside. */
interface Pattern {
  before: number;
  after: number;
}

/** For each result the number of its pattern; patterns in order of appearance. */
function patternsOf(axis: Axis): { of: Int32Array<ArrayBuffer>; patterns: Pattern[] } {
  const firstInside = axis.map.findIndex((index) => index >= 0);
  const start = firstInside < 0 ? axis.extended : firstInside;
  const end = axis.map.findLastIndex((index) => index >= 0) + 1;
  const of = new Int32Array(axis.count);
  const patterns: Pattern[] = [];
  const seen = new Map<number, number>();
  for (let k = 0; k < axis.count; k++) {
    const before = Math.min(axis.taps, Math.max(0, start - k));
    const after = Math.max(before, Math.min(axis.taps, end - k));
    const key = before * (axis.taps + 1) + after;
    if (!seen.has(key)) patterns.push({ before, after });
    if (!seen.has(key)) seen.set(key, seen.size);
    of[k] = seen.get(key)!;
  }
  return { of, patterns };
}

/** Sums down the columns of taps: entry [j, i] is the weight of taps 0 … j − 1 of column i. Empty stretches differ by exactly 0. */
function columnSums(taps: Float64Array, rows: number, columns: number): Float64Array<ArrayBuffer> {
  const sums = new Float64Array((rows + 1) * columns);
  for (let k = 0; k < rows * columns; k++) sums[k + columns] = sums[k]! + taps[k]!;
  return sums;
}

/** For one row pattern: entry i is the weight inside of tap columns 0 … i − 1; `whole` is the weight of outside rows that count all the same. */
function rowSums(problem: Problem, sums: Float64Array, { before, after }: Pattern): { inside: Float64Array; whole: number } {
  const columns = problem.horizontal.taps;
  const inside = new Float64Array(columns + 1);
  let whole = 0;
  for (let i = 0; i < columns; i++) {
    const part = sums[after * columns + i]! - sums[before * columns + i]!;
    inside[i + 1] = inside[i]! + part;
    if (problem.vertical.rule !== "renormalised") whole += sums[problem.vertical.taps * columns + i]! - part;
  }
  return { inside, whole };
}

function tabulate(problem: Problem): Weights {
  const { horizontal, vertical, analysis } = problem;
  const sums = columnSums(correlationTaps(problem), vertical.taps, horizontal.taps);
  const rows = patternsOf(vertical);
  const columns = patternsOf(horizontal);
  const stride = columns.patterns.length;
  const factors = new Float32Array(rows.patterns.length * stride);
  let smallest = Infinity;
  rows.patterns.forEach((row, r) => {
    const { inside, whole } = rowSums(problem, sums, row);
    columns.patterns.forEach(({ before, after }, c) => {
      const all = horizontal.rule !== "renormalised";
      const weight = whole + (all ? inside[horizontal.taps]! : inside[after]! - inside[before]!);
      if (weight > 0) smallest = Math.min(smallest, weight);
      factors[r * stride + c] = weight > 0 ? (after - before === horizontal.taps && row.after - row.before === vertical.taps ? 1 : analysis.sum / weight) : 0;
    });
  });
  return { rows: rows.of, columns: columns.of, stride, factors, smallest };
}

const known = new WeakMap<Problem, Weights>();

export function weightsOf(problem: Problem): Weights {
  let weights = known.get(problem);
  if (!weights) known.set(problem, (weights = tabulate(problem)));
  return weights;
}

export function smallestWeight(problem: Problem): number {
  return weightsOf(problem).smallest;
}
