import * as field from "../generated/record.js";
import { outputBound, sumError } from "./accuracy.js";
import { frameCounts, frameOf, programOf, type Frame } from "./frame.js";
import type { MethodPlan } from "./method.js";
import { correlationTaps, type Problem } from "./problem.js";
import { blocksOf, ringTable, sweepCalls, sweepStagedRows, sweepSteps } from "./sweeps.js";

/** Extended rows in a ring; every tap meets every result: m·n multiply–adds a sample. */
interface DirectFrame extends Frame {
  taps: number;
  ring: number;
  ringRows: number;
  table: number;
  results: number;
}

function frame(problem: Problem): DirectFrame {
  const { horizontal, vertical, channels } = problem;
  const base = frameOf(problem, sweepStagedRows(problem, horizontal.taps * vertical.taps * horizontal.count * channels));
  const { arrangement } = base;
  const ringRows = vertical.taps + 1;
  return {
    ...base,
    ringRows,
    taps: arrangement.take(horizontal.taps * vertical.taps * 4),
    ring: arrangement.take(ringRows * base.extendedStride),
    table: arrangement.take(2 * ringRows * 4),
    results: arrangement.take(2 * base.resultStride),
  };
}

/** Each tap is rounded once, each product once, each sum once. */
function error(problem: Problem): number {
  return sumError(problem, problem.horizontal.taps * problem.vertical.taps + 1, problem.analysis.absoluteSum);
}

export const direct: MethodPlan = {
  name: "direct",

  applicable: () => true,

  work(problem) {
    const { horizontal, vertical } = problem;
    const layout = frame(problem);
    const blocks = blocksOf(problem, layout);
    return {
      setup: { setup: 1, setupTap: horizontal.taps * vertical.taps, setupByte: layout.arrangement.byteLength },
      run: {
        ...frameCounts(problem, vertical.extended, sweepCalls(problem, layout)),
        directTap: blocks * 32 * horizontal.taps * vertical.taps,
        directLoop: blocks * vertical.taps,
      },
      bytes: layout.arrangement.byteLength,
    };
  },

  errorBound: (problem) => outputBound(problem, error(problem)),

  arithmetic: () => "float32 sums over all taps, row by row",

  program(problem) {
    const { horizontal, vertical } = problem;
    const layout = frame(problem);
    return programOf(problem, layout, {
      fields: (job) =>
        job
          .pointer(field.TAPS, layout.taps)
          .integer(field.KERNEL_COLUMNS, horizontal.taps)
          .integer(field.KERNEL_ROWS, vertical.taps)
          .pointer(field.ROW_TABLE, layout.table)
          .integer(field.RING_ROWS, layout.ringRows)
          .pointer(field.RESULT, layout.results)
          .integer(field.RESULT_STRIDE, layout.resultStride)
          .integer(field.RESULT_FLOATS, layout.paddedFloats),
      tables: [
        { offset: layout.taps, data: Float32Array.from(correlationTaps(problem)) },
        { offset: layout.table, data: ringTable(layout.ring, layout.ringRows, layout.extendedStride), addresses: "all" },
      ],
      setup: [],
      steps: sweepSteps(problem, layout, "sweepDirect"),
      error: error(problem),
      round: false,
    });
  },
};
