import * as field from "../generated/record.js";
import { rowStride } from "./arrangement.js";
import { biasOf, bytesThroughout, fixedKernel, offsetError, pairsOfRows, tapsByPairs, type FixedTaps } from "./fixedPoint.js";
import { frameCounts, frameOf, programOf } from "./frame.js";
import type { Program } from "../runtime/program.js";
import type { MethodPlan } from "./method.js";
import type { Problem } from "./problem.js";
import { pairBlocks, ringTables, sweepCalls, sweepFields, sweepStagedRows, sweepSteps, type SweepFrame } from "./sweeps.js";

/** A ring of pairs of rows: a dot product of two taps where the float form has one multiply–add. */
export interface PairFrame extends SweepFrame {
  taps: number;
  bytes: number;
  byteStride: number;
}

const operationsPerRow = ({ horizontal, vertical, channels }: Problem): number => horizontal.taps * pairsOfRows(vertical.taps) * horizontal.count * channels;

function frame(problem: Problem): PairFrame {
  const { horizontal, vertical, channels } = problem;
  const ringRows = pairsOfRows(vertical.taps);
  const base = frameOf(problem, sweepStagedRows(problem, operationsPerRow(problem)));
  const { arrangement } = base;
  const byteStride = rowStride(horizontal.extended * channels + 16);
  return {
    ...base,
    ringRows,
    ringStride: base.extendedStride,
    byteStride,
    taps: arrangement.take(horizontal.taps * ringRows * 8),
    ring: arrangement.take(ringRows * base.extendedStride),
    table: arrangement.take(2 * ringRows * 4),
    bytes: arrangement.take(2 * byteStride),
    results: arrangement.take(base.resultStride),
  };
}

function fixed(problem: Problem): FixedTaps {
  return fixedKernel(problem.request) as FixedTaps;
}

/** Counts of entering and leaving bytes that stay bytes. */
export function byteCounts(problem: Problem, layout: PairFrame): ReturnType<typeof frameCounts> {
  const { horizontal, vertical, channels, request } = problem;
  const results = horizontal.count * vertical.count;
  return {
    ...frameCounts(problem, vertical.extended, sweepCalls(problem, layout)),
    enter_u8: 0,
    leave_u8: 0,
    alphaPixel: 0,
    pairSample: vertical.extended * horizontal.extended * channels,
    byteResult: results * channels,
    keptPixel: request.alpha === "keep" ? results : 0,
  };
}

/** In output units, gain and offset included. */
function error(problem: Problem): number {
  const { offset } = problem.request.output;
  const { error: ofTaps, shift } = fixed(problem);
  return 255 * ofTaps + offsetError(offset, shift);
}

/** By the taps that they are made of: as written, and reversed. */
const tables = /* @__PURE__ */ new WeakMap<FixedTaps, [PairTable?, PairTable?]>();

interface PairTable {
  taps: Int32Array<ArrayBuffer>;
  /** Pairs of which either result row's is not 0. */
  entries: number;
}

/** Taps as pairs of rows meet them; made once for a kernel. */
function pairTable(problem: Problem): PairTable {
  const { horizontal, vertical, reversed } = problem;
  const fixedTaps = fixed(problem);
  const made = tables.get(fixedTaps) ?? [];
  tables.set(fixedTaps, made);
  const known = made[reversed ? 1 : 0];
  if (known) return known;
  const taps = tapsByPairs(reversed ? fixedTaps.integers.slice().reverse() : fixedTaps.integers, vertical.taps, horizontal.taps);
  let entries = 0;
  for (let k = 0; k < taps.length; k += 2) if (taps[k] !== 0 || taps[k + 1] !== 0) entries++;
  return (made[reversed ? 1 : 0] = { taps, entries });
}

const pairTaps = (problem: Problem): Int32Array<ArrayBuffer> => pairTable(problem).taps;

const entriesOf = (problem: Problem): number => pairTable(problem).entries;

/** Pairs of taps of a kernel of which either result row's is not 0, as entries: see the core's bytes/sparse. */
function listOf(problem: Problem): Int32Array<ArrayBuffer> {
  const { horizontal, channels } = problem;
  const table = pairTaps(problem);
  const entries: number[] = [];
  for (let k = 0; k < table.length / 2; k++) {
    const [upper, lower] = [table[2 * k]!, table[2 * k + 1]!];
    if (upper !== 0 || lower !== 0) entries.push(4 * Math.floor(k / horizontal.taps), 4 * channels * (k % horizontal.taps), upper, lower);
  }
  return Int32Array.from(entries);
}

function applicable(problem: Problem): true | string {
  if (!bytesThroughout(problem)) return "Samples and results are not bytes throughout.";
  const taps = fixedKernel(problem.request);
  return typeof taps === "string" ? taps : true;
}

const fixedArithmetic = (problem: Problem): string => `fixed point: 8-bit samples × 16-bit taps ÷ 2^${fixed(problem).shift}, exact 32-bit sums`;

/** Entries are twice as long as pairs of taps: a list takes the room of all where it is no longer than half of them. */
export const directBytesSparse: MethodPlan = {
  name: "direct",
  variant: "listed bytes",

  applicable(problem) {
    const applies = applicable(problem);
    if (applies !== true) return applies;
    const count = entriesOf(problem);
    return (count > 0 && count <= (problem.horizontal.taps * pairsOfRows(problem.vertical.taps)) / 2) || "More than half of the pairs of taps are not 0.";
  },

  work(problem) {
    const { horizontal, vertical } = problem;
    const layout = frame(problem);
    const { blocks, floats } = pairBlocks(problem, layout);
    return {
      setup: { setup: 1, setupTap: horizontal.taps * vertical.taps, setupByte: layout.arrangement.byteLength },
      run: { ...byteCounts(problem, layout), listedPair: floats * entriesOf(problem), pairLoop: blocks },
      bytes: layout.arrangement.byteLength,
      leastCall: 2 * operationsPerRow(problem),
    };
  },

  errorBound: error,

  arithmetic: (problem) => `${fixedArithmetic(problem)}, over the taps that are not 0`,

  program: (problem) => programBy(problem, listOf(problem), entriesOf(problem)),
};

export const directBytes: MethodPlan = {
  name: "direct",
  variant: "bytes",

  applicable,

  work(problem) {
    const { horizontal, vertical } = problem;
    const layout = frame(problem);
    const { blocks, floats } = pairBlocks(problem, layout);
    return {
      setup: { setup: 1, setupTap: horizontal.taps * vertical.taps, setupByte: layout.arrangement.byteLength },
      run: { ...byteCounts(problem, layout), pairTap: floats * horizontal.taps * layout.ringRows, pairLoop: blocks * layout.ringRows },
      bytes: layout.arrangement.byteLength,
      leastCall: 2 * operationsPerRow(problem),
    };
  },

  errorBound: error,

  arithmetic: fixedArithmetic,

  program: (problem) => programBy(problem, pairTaps(problem), 0),
};

function programBy(problem: Problem, taps: Int32Array<ArrayBuffer>, entries: number): Program {
  const layout = frame(problem);
  const { shift } = fixed(problem);
  return programOf(problem, layout, {
    fields: (job) =>
      sweepFields(job, layout)
        .pointer(field.TAPS, layout.taps)
        .integer(field.TAP_ENTRIES, entries)
        .pointer(field.ENTERED, layout.bytes)
        .integer(field.ENTERED_STRIDE, layout.byteStride)
        .integer(field.SUM_BIAS, biasOf(problem.request.output.offset, shift))
        .integer(field.SUM_SHIFT, shift),
    tables: [{ offset: layout.taps, data: taps }, ringTables(layout, 1)],
    setup: [],
    steps: sweepSteps(problem, layout, "sweepDirectBytes"),
    error: { relative: 0, absolute: error(problem) },
    round: false,
  });
}
