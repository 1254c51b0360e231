import type { RoutineName, Step } from "../runtime/program.js";
import { writing, type Frame } from "./frame.js";
import type { Problem } from "./problem.js";

/**
 * Multiply–adds that one call does at most, so that it lasts a few milliseconds: 2 ms at the 8 per nanosecond that SIMD builds reach
 * on the slower of the machines measured, four times that in scalar builds. One pair of rows is the least.
 */
const operationsPerCall = 16_000_000;

/** Result rows of one call: an even number, as sweeps go two rows at a time. */
export function sliceRows(problem: Problem, operationsPerRow: number, affordable: number): number {
  const bounded = Math.min(affordable, operationsPerCall / Math.max(1, operationsPerRow), problem.vertical.count + 1);
  return Math.max(2, 2 * Math.floor(bounded / 2));
}

/** Rows that a sweep's first call reads: its own, and those above its first result. */
export function sweepStagedRows(problem: Problem, operationsPerRow: number): (affordable: number) => number {
  return (affordable) => sliceRows(problem, operationsPerRow, affordable) + problem.vertical.taps - 1;
}

export function sweepCalls(problem: Problem, frame: Frame): number {
  return Math.ceil(problem.vertical.count / (frame.stagedRows - problem.vertical.taps + 1));
}

/** Calls of a sweep, top to bottom; each reads the rows that are new to it. */
export function sweepSteps(problem: Problem, frame: Frame, routine: RoutineName): Step[] {
  const { count, taps } = problem.vertical;
  const slice = frame.stagedRows - taps + 1;
  const steps: Step[] = [];
  for (let from = 0; from < count; from += slice) {
    const to = Math.min(count, from + slice);
    const first = from === 0 ? 0 : from + taps - 1;
    const step: Step = { routine, from, to, strip: 0, read: { first, count: to + taps - 1 - first } };
    steps.push(writing(problem, step, { first: from, count: to - from }));
  }
  return steps;
}

/** Pointer table of a ring: its rows twice over, so that any stretch of them lies side by side. */
export function ringTable(offset: number, rows: number, stride: number): Int32Array<ArrayBuffer> {
  return Int32Array.from({ length: 2 * rows }, (_, k) => offset + (k % rows) * stride);
}

/** Blocks of 2 × 16 results, the tail counted as one. */
export function blocksOf(problem: Problem, frame: Frame): number {
  return Math.ceil(problem.vertical.count / 2) * Math.ceil(frame.paddedFloats / 16);
}
