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

/** Sums of stretches of a list, never as differences: small weights beside large ones would drown. */
class StretchSums {
  readonly #values: ArrayLike<number>;
  readonly #upTo: Float64Array;
  readonly #from: Float64Array;
  #blocks: { length: number; upTo: Float64Array; from: Float64Array } | undefined;

  constructor(values: ArrayLike<number>) {
    this.#values = values;
    this.#upTo = sumsUpTo(values, values.length);
    this.#from = sumsFrom(values, values.length);
  }

  /** Σ values[before] … values[after − 1]. */
  inside({ before, after }: Pattern): number {
    const length = after - before;
    if (length === 0) return 0;
    if (before === 0) return this.#upTo[after - 1]!;
    if (after === this.#values.length) return this.#from[before]!;
    const { upTo, from } = this.#blocksOf(length);
    return before % length === 0 ? upTo[after - 1]! : from[before]! + upTo[after - 1]!;
  }

  /** Stretches that touch neither end are all of one length (the image's): two blocks of that length cover each. */
  #blocksOf(length: number): { upTo: Float64Array; from: Float64Array } {
    if (this.#blocks?.length !== length) this.#blocks = { length, upTo: sumsUpTo(this.#values, length), from: sumsFrom(this.#values, length) };
    return this.#blocks;
  }

  /** Σ of all others. */
  outside({ before, after }: Pattern): number {
    return (before > 0 ? this.#upTo[before - 1]! : 0) + (after < this.#values.length ? this.#from[after]! : 0);
  }
}

/** Entry k: the sum from the start of its block of `length` values up to value k. */
function sumsUpTo(values: ArrayLike<number>, length: number): Float64Array {
  const sums = new Float64Array(values.length);
  for (let k = 0; k < values.length; k++) sums[k] = (k % length === 0 ? 0 : sums[k - 1]!) + values[k]!;
  return sums;
}

/** Entry k: the sum from value k to the end of its block. */
function sumsFrom(values: ArrayLike<number>, length: number): Float64Array {
  const sums = new Float64Array(values.length);
  for (let k = values.length - 1; k >= 0; k--) sums[k] = ((k + 1) % length === 0 || k + 1 === values.length ? 0 : sums[k + 1]!) + values[k]!;
  return sums;
}

/** For one row pattern: the weight inside of each column of taps, and the weight of outside rows that count all the same. */
function rowSums(problem: Problem, columns: StretchSums[], rows: Pattern): { inside: StretchSums; whole: number } {
  const inside = new StretchSums(columns.map((column) => column.inside(rows)));
  const counted = problem.vertical.rule === "renormalised" ? 0 : columns.reduce((sum, column) => sum + column.outside(rows), 0);
  return { inside, whole: counted };
}

/** 2⁻¹⁰⁰: a smaller share of the weight counts as nothing inside (contributions that small may be taken as 0, and Σh ÷ weight must not overflow). */
const leastShare = 7.888609052210118e-31;

function tabulate(problem: Problem): Weights {
  const { horizontal, vertical, analysis } = problem;
  const taps = correlationTaps(problem);
  const columnOf = (i: number): Float64Array => Float64Array.from({ length: vertical.taps }, (_, j) => taps[j * horizontal.taps + i]!);
  const tapColumns = Array.from({ length: horizontal.taps }, (_, i) => new StretchSums(columnOf(i)));
  const rows = patternsOf(vertical);
  const columns = patternsOf(horizontal);
  const everyColumn = { before: 0, after: horizontal.taps };
  const stride = columns.patterns.length;
  const factors = new Float32Array(rows.patterns.length * stride);
  let smallest = Infinity;
  rows.patterns.forEach((row, r) => {
    const { inside, whole } = rowSums(problem, tapColumns, row);
    columns.patterns.forEach((column, c) => {
      const complete = row.after - row.before === vertical.taps && column.after - column.before === horizontal.taps;
      const found = whole + inside.inside(horizontal.rule === "renormalised" ? column : everyColumn);
      const weight = found > leastShare * analysis.sum ? found : 0;
      if (weight > 0) smallest = Math.min(smallest, weight);
      factors[r * stride + c] = complete ? 1 : weight > 0 ? analysis.sum / weight : 0;
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
