import type { Kernel } from "../kernels/kernel.js";
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
interface Patterns {
  of: Int32Array<ArrayBuffer>;
  patterns: Pattern[];
}

const knownPatterns = /* @__PURE__ */ new WeakMap<Axis, Patterns>();

function patternsOf(axis: Axis): Patterns {
  let found = knownPatterns.get(axis);
  if (!found) knownPatterns.set(axis, (found = findPatterns(axis)));
  return found;
}

function findPatterns(axis: Axis): Patterns {
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

/**
 * Sums of stretches of lists, never as differences: small weights beside large ones would drown. Lists lie side by side: value k of list i is
 * values[k · lists + i].
 */
class StretchSums {
  readonly #values: Float64Array;
  readonly #lists: number;
  readonly #length: number;
  readonly #upTo: Float64Array;
  readonly #from: Float64Array;
  #blocks: { length: number; upTo: Float64Array; from: Float64Array } | undefined;

  constructor(values: Float64Array, lists: number) {
    this.#values = values;
    this.#lists = lists;
    this.#length = values.length / lists;
    this.#upTo = sumsUpTo(values, lists, this.#length);
    this.#from = sumsFrom(values, lists, this.#length);
  }

  /** Σ values[before] … values[after − 1] of list i. */
  inside({ before, after }: Pattern, i: number): number {
    const lists = this.#lists;
    const length = after - before;
    if (length === 0) return 0;
    if (before === 0) return this.#upTo[(after - 1) * lists + i]!;
    if (after === this.#length) return this.#from[before * lists + i]!;
    const { upTo, from } = this.#blocksOf(length);
    const last = upTo[(after - 1) * lists + i]!;
    return before % length === 0 ? last : from[before * lists + i]! + last;
  }

  /** Stretches that touch neither end are all of one length (the image's): two blocks of that length cover each. */
  #blocksOf(length: number): { upTo: Float64Array; from: Float64Array } {
    if (this.#blocks?.length !== length) {
      this.#blocks = { length, upTo: sumsUpTo(this.#values, this.#lists, length), from: sumsFrom(this.#values, this.#lists, length) };
    }
    return this.#blocks;
  }

  /** Σ of all others. */
  outside({ before, after }: Pattern, i: number): number {
    return (before > 0 ? this.#upTo[(before - 1) * this.#lists + i]! : 0) + (after < this.#length ? this.#from[after * this.#lists + i]! : 0);
  }
}

/** Entry k: the sum from the start of its block of `length` values up to value k, list by list. */
function sumsUpTo(values: Float64Array, lists: number, length: number): Float64Array {
  const sums = values.slice();
  for (let k = 0, at = 0; at < values.length; k++) {
    if (k % length === 0) at += lists;
    else for (let i = 0; i < lists; i++, at++) sums[at] = sums[at - lists]! + values[at]!;
  }
  return sums;
}

/** Entry k: the sum from value k to the end of its block. */
function sumsFrom(values: Float64Array, lists: number, length: number): Float64Array {
  const sums = values.slice();
  const count = values.length / lists;
  for (let k = count - 2; k >= 0; k--) {
    if ((k + 1) % length === 0) continue;
    for (let i = 0, at = k * lists; i < lists; i++, at++) sums[at] = sums[at + lists]! + values[at]!;
  }
  return sums;
}

/** For one row pattern: the weight inside of each column of taps, and the weight of outside rows that count all the same. */
function rowSums(problem: Problem, columns: StretchSums, rows: Pattern): { inside: StretchSums; whole: number } {
  const { taps } = problem.horizontal;
  const inside = new Float64Array(taps);
  let counted = 0;
  for (let i = 0; i < taps; i++) {
    inside[i] = columns.inside(rows, i);
    if (problem.vertical.rule !== "renormalised") counted += columns.outside(rows, i);
  }
  return { inside: new StretchSums(inside, 1), whole: counted };
}

/** 2⁻¹⁰⁰: a smaller share of the weight counts as nothing inside (contributions that small may be taken as 0, and Σh ÷ weight must not overflow). */
const leastShare = 7.888609052210118e-31;

function tabulate(problem: Problem): Weights {
  const { horizontal, vertical, analysis } = problem;
  const tapColumns = new StretchSums(correlationTaps(problem), horizontal.taps);
  const rows = patternsOf(vertical);
  const columns = patternsOf(horizontal);
  const everyColumn = { before: 0, after: horizontal.taps };
  const stride = columns.patterns.length;
  const factors = new Float32Array(rows.patterns.length * stride);
  const least = leastShare * analysis.sum;
  let smallest = Infinity;
  for (const [r, row] of rows.patterns.entries()) {
    const { inside, whole } = rowSums(problem, tapColumns, row);
    const completeRows = row.after - row.before === vertical.taps;
    for (let c = 0; c < stride; c++) {
      const column = columns.patterns[c]!;
      const found = whole + inside.inside(horizontal.rule === "renormalised" ? column : everyColumn, 0);
      const weight = found > least ? found : 0;
      if (weight > 0) smallest = Math.min(smallest, weight);
      const complete = completeRows && column.after - column.before === horizontal.taps;
      factors[r * stride + c] = complete ? 1 : weight > 0 ? analysis.sum / weight : 0;
    }
  }
  return { rows: rows.of, columns: columns.of, stride, factors, smallest };
}

const known = /* @__PURE__ */ new WeakMap<Problem, Weights>();

/** By kernel, the last table that was made, and for what: `explain` and `prepare` often follow each other. */
const last = /* @__PURE__ */ new WeakMap<Kernel, { axes: string; weights: Weights }>();

const axisKey = ({ rule, count, taps, first, map }: Axis): string => `${JSON.stringify(rule)} ${count} ${taps} ${first} ${map.at(-1)} ${map[0]}`;

/** Bytes that the table and its indices take, without making them. */
export function weightBytes({ horizontal, vertical }: Problem): { rows: number; columns: number; factors: number } {
  const [rows, columns] = [patternsOf(vertical), patternsOf(horizontal)];
  return { rows: rows.of.byteLength, columns: columns.of.byteLength, factors: 4 * rows.patterns.length * columns.patterns.length };
}

export function weightsOf(problem: Problem): Weights {
  const found = known.get(problem);
  if (found) return found;
  const { kernel } = problem.request;
  const { width, height } = problem.request;
  const axes = `${width}×${height} ${problem.reversed} ${axisKey(problem.horizontal)} ${axisKey(problem.vertical)}`;
  const before = last.get(kernel);
  const weights = before?.axes === axes ? before.weights : tabulate(problem);
  last.set(kernel, { axes, weights });
  known.set(problem, weights);
  return weights;
}

/** Those that hold no other one: sorted by where they end, each begins later than all before it. */
function innermost(patterns: readonly Pattern[]): Pattern[] {
  let latest = -1;
  return patterns
    .toSorted((a, b) => a.after - b.after || b.before - a.before)
    .filter(({ before }) => {
      const isInnermost = before > latest;
      latest = Math.max(latest, before);
      return isInnermost;
    });
}

/**
 * The smallest inside weight that is not 0. No tap is negative, so what holds more taps weighs no less: where something is inside of the innermost
 * patterns, one of them has it, and no table is made.
 */
export function smallestWeight(problem: Problem): number {
  const { horizontal, vertical, analysis } = problem;
  const known = knownSmallest.get(problem);
  if (known !== undefined) return known;
  const tapColumns = new StretchSums(correlationTaps(problem), horizontal.taps);
  const everyColumn = { before: 0, after: horizontal.taps };
  const columns = horizontal.rule === "renormalised" ? innermost(patternsOf(horizontal).patterns) : [everyColumn];
  let smallest = Infinity;
  for (const row of innermost(patternsOf(vertical).patterns)) {
    const { inside, whole } = rowSums(problem, tapColumns, row);
    for (const column of columns) smallest = Math.min(smallest, whole + inside.inside(column, 0));
  }
  const found = smallest > leastShare * analysis.sum ? smallest : weightsOf(problem).smallest;
  knownSmallest.set(problem, found);
  return found;
}

const knownSmallest = /* @__PURE__ */ new WeakMap<Problem, number>();
