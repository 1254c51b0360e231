import * as field from "../generated/record.js";
import type { RoutineName, Step, Table } from "../runtime/program.js";
import { plainStep, writing, type Frame } from "./frame.js";
import { vectorFloats, type Problem } from "./problem.js";
import type { JobRecord } from "./record.js";
import { remembered } from "./remembered.js";

/** What every sweep has: a ring of rows with its pointer table, and result rows. */
export interface SweepFrame extends Frame {
  ring: number;
  ringRows: number;
  ringStride: number;
  /** Pointer tables, one a ring. */
  table: number;
  results: number;
}

/** The fields that every sweep reads. */
export function sweepFields(job: JobRecord, layout: SweepFrame): JobRecord {
  return job
    .pointer(field.ROW_TABLE, layout.table)
    .integer(field.RING_ROWS, layout.ringRows)
    .pointer(field.RESULT, layout.results)
    .integer(field.RESULT_STRIDE, layout.resultStride)
    .integer(field.RESULT_FLOATS, layout.paddedFloats);
}

/** Pointer tables of `rings` rings that lie one after the other: the rows of each twice over, so that any stretch of them lies side by side. */
export function ringTables(layout: SweepFrame, rings: number): Table {
  const { ring, ringRows, ringStride, table } = layout;
  const pointers = Array.from({ length: rings * 2 * ringRows }, (_, k) => {
    const inRing = k % (2 * ringRows);
    return ring + ((k - inRing) / 2 + (inRing % ringRows)) * ringStride;
  });
  return { offset: table, data: Int32Array.from(pointers), addresses: "all" };
}

/**
 * Multiply–adds that one call does at most, so that it lasts a few milliseconds: 2 ms at the 8 per nanosecond that SIMD builds reach
 * on the slower of the machines measured, four times that in scalar builds. One pair of rows is the least.
 */
const operationsPerCall = 16_000_000;

/** Extended rows that one call of a sweep enters: an even number, as sweeps go two rows at a time. */
export function sweepStagedRows(problem: Problem, operationsPerRow: number): (affordable: number) => number {
  return (affordable) => {
    const bounded = Math.min(affordable, operationsPerCall / Math.max(1, operationsPerRow), problem.vertical.extended + 1);
    return Math.max(2, 2 * Math.floor(bounded / 2));
  };
}

/**
 * Where the calls of a sweep end, in its units (see the core's sweep): the first taps − 1 rows only enter, so that a tall kernel's first call is
 * no longer than the others. Results come in pairs, so every call with results behind it begins with an even one.
 */
function* callEnds(problem: Problem, frame: Frame): Generator<number> {
  const { count, taps } = problem.vertical;
  for (let end = 1 - taps; end < count;) {
    end += frame.stagedRows;
    if (end > 0) end -= end % 2;
    yield Math.min(count, end);
  }
}

export function sweepCalls(problem: Problem, frame: Frame): number {
  return [...callEnds(problem, frame)].length;
}

const stepsOf = /* @__PURE__ */ remembered(() => new Map<string, Step[]>());

/** Calls of a sweep, top to bottom; each reads the rows that are new to it. */
export function sweepSteps(problem: Problem, frame: Frame, routine: RoutineName): Step[] {
  const known = stepsOf(problem);
  const name = `${routine} ${frame.stagedRows}`;
  let steps = known.get(name);
  if (!steps) known.set(name, (steps = makeSteps(problem, frame, routine)));
  return steps;
}

function makeSteps(problem: Problem, frame: Frame, routine: RoutineName): Step[] {
  const { taps } = problem.vertical;
  const steps: Step[] = [];
  let from = 1 - taps;
  for (const to of callEnds(problem, frame)) {
    const step: Step = { ...plainStep(routine, from, to), read: { first: from + taps - 1, count: to - from } };
    const first = Math.max(from, 0);
    steps.push(to > first ? writing(problem, step, { first, count: to - first }) : step);
    from = to;
  }
  return steps;
}

/** Blocks of `vectors` vectors that cover a row, or single vectors where it is shorter than a block; and the floats that they compute. */
function cover(problem: Problem, layout: Frame, vectors: number): { blocks: number; floats: number } {
  const block = vectors * vectorFloats(problem);
  if (layout.paddedFloats < block) return { blocks: layout.paddedFloats / vectorFloats(problem), floats: layout.paddedFloats };
  const blocks = Math.ceil(layout.paddedFloats / block);
  return { blocks, floats: blocks * block };
}

/** Blocks and floats of the direct method and of column passes: two result rows × four vectors. */
export function pairBlocks(problem: Problem, layout: Frame): { blocks: number; floats: number } {
  const row = cover(problem, layout, 4);
  const pairs = Math.ceil(problem.vertical.count / 2);
  return { blocks: pairs * row.blocks, floats: 2 * pairs * row.floats };
}

/** Blocks and floats of a row pass over every extended row: six vectors. */
export function rowBlocks(problem: Problem, layout: Frame): { blocks: number; floats: number } {
  const row = cover(problem, layout, 6);
  return { blocks: problem.vertical.extended * row.blocks, floats: problem.vertical.extended * row.floats };
}

/** The same over every result row. */
export function resultBlocks(problem: Problem, layout: Frame): { blocks: number; floats: number } {
  const row = cover(problem, layout, 6);
  return { blocks: problem.vertical.count * row.blocks, floats: problem.vertical.count * row.floats };
}
