import * as field from "../generated/record.js";
import { outputBound, sumError, underflow, type MethodError } from "./accuracy.js";
import { frameCounts, frameOf, programOf } from "./frame.js";
import type { Program } from "../runtime/program.js";
import type { MethodPlan } from "./method.js";
import { floatTaps, type Problem } from "./problem.js";
import { pairBlocks, resultBlocks, ringTables, sweepCalls, sweepFields, sweepStagedRows, sweepSteps, type SweepFrame } from "./sweeps.js";

/** Extended rows in a ring; every tap meets every result: m·n multiply–adds a sample. A kernel with many taps of 0 is gone through by a list. */
const entryBytes = 12;

interface DirectFrame extends SweepFrame {
  taps: number;
}

const operationsPerRow = ({ horizontal, vertical, channels }: Problem): number => horizontal.taps * vertical.taps * horizontal.count * channels;

/** A list pays where no more than half of the taps are left: an entry costs about a third more than a tap among all of them. */
const mostEntries = ({ horizontal, vertical }: Problem): number => Math.floor((horizontal.taps * vertical.taps) / 2);

/** Room for the longest list, so that other taps find it. */
const listBytes = (problem: Problem): number => mostEntries(problem) * entryBytes;

function frame(problem: Problem): DirectFrame {
  const { horizontal, vertical } = problem;
  const base = frameOf(problem, sweepStagedRows(problem, operationsPerRow(problem)));
  const { arrangement } = base;
  const ringRows = vertical.taps + 1;
  return {
    ...base,
    ringRows,
    ringStride: base.extendedStride,
    taps: arrangement.take(Math.max(horizontal.taps * vertical.taps * 4, listBytes(problem))),
    ring: arrangement.take(ringRows * base.extendedStride),
    table: arrangement.take(2 * ringRows * 4),
    results: arrangement.take(2 * base.resultStride),
  };
}

/** Each tap is rounded once, each product once, each sum once. */
function error(problem: Problem): MethodError {
  return { relative: sumError(problem, problem.horizontal.taps * problem.vertical.taps + 1, problem.analysis.absoluteSum), absolute: underflow(problem) };
}

/** Entries of the taps that are not 0, in their order: see the core's sparse. */
function listOf(problem: Problem): Int32Array<ArrayBuffer> {
  const { horizontal, channels } = problem;
  const taps = floatTaps(problem);
  const bits = new Int32Array(taps.buffer, taps.byteOffset, taps.length);
  const entries: number[] = [];
  for (let k = 0; k < taps.length; k++) {
    if (taps[k] !== 0) entries.push(4 * Math.floor(k / horizontal.taps), 4 * channels * (k % horizontal.taps), bits[k]!);
  }
  return Int32Array.from(entries);
}

/** How many taps are not 0. */
const countOf = ({ analysis }: Problem): number => analysis.kept();

export const direct: MethodPlan = {
  name: "direct",
  variant: "floats",

  applicable: () => true,

  work(problem) {
    const { horizontal, vertical } = problem;
    const layout = frame(problem);
    const { blocks, floats } = pairBlocks(problem, layout);
    return {
      setup: { setup: 1, setupTap: horizontal.taps * vertical.taps, setupByte: layout.arrangement.byteLength },
      run: {
        ...frameCounts(problem, vertical.extended, sweepCalls(problem, layout)),
        directTap: floats * horizontal.taps * (vertical.taps - 1),
        directEdgeTap: floats * horizontal.taps,
        directLoop: blocks * vertical.taps,
      },
      bytes: layout.arrangement.byteLength,
      leastCall: 2 * operationsPerRow(problem),
    };
  },

  errorBound: (problem) => outputBound(problem, error(problem)),

  arithmetic: () => "float32 sums over all taps, row by row",

  program: (problem) => programBy(problem, floatTaps(problem), 0),
};

export const directSparse: MethodPlan = {
  name: "direct",
  variant: "listed floats",

  applicable(problem) {
    const count = countOf(problem);
    return (count > 0 && count <= mostEntries(problem)) || "More than half of the taps are not 0.";
  },

  work(problem) {
    const { horizontal, vertical } = problem;
    const layout = frame(problem);
    const count = countOf(problem);
    return {
      setup: { setup: 1, setupTap: horizontal.taps * vertical.taps, setupByte: layout.arrangement.byteLength },
      run: {
        ...frameCounts(problem, vertical.extended, sweepCalls(problem, layout)),
        listedTap: resultBlocks(problem, layout).floats * count,
        directLoop: resultBlocks(problem, layout).blocks,
      },
      bytes: layout.arrangement.byteLength,
      leastCall: 2 * operationsPerRow(problem),
    };
  },

  errorBound: (problem) => outputBound(problem, error(problem)),

  arithmetic: (problem) => `float32 sums over the ${countOf(problem)} taps that are not 0, row by row`,

  program: (problem) => programBy(problem, listOf(problem), countOf(problem)),
};

function programBy(problem: Problem, taps: Float32Array<ArrayBuffer> | Int32Array<ArrayBuffer>, entries: number): Program {
  const layout = frame(problem);
  return programOf(problem, layout, {
    fields: (job) => sweepFields(job, layout).pointer(field.TAPS, layout.taps).integer(field.TAP_ENTRIES, entries),
    tables: [{ offset: layout.taps, data: taps }, ringTables(layout, 1)],
    setup: [],
    steps: sweepSteps(problem, layout, "sweepDirect"),
    error: error(problem),
    round: false,
  });
}
