import * as field from "../generated/record.js";
import { outputBound, sumError, underflow, type MethodError } from "./accuracy.js";
import { frameCounts, frameOf, programOf } from "./frame.js";
import type { MethodPlan } from "./method.js";
import { floatTaps, type Problem } from "./problem.js";
import { pairBlocks, ringTables, sweepCalls, sweepFields, sweepStagedRows, sweepSteps, type SweepFrame } from "./sweeps.js";

/** Extended rows in a ring; every tap meets every result: m·n multiply–adds a sample. */
interface DirectFrame extends SweepFrame {
  taps: number;
}

const operationsPerRow = ({ horizontal, vertical, channels }: Problem): number => horizontal.taps * vertical.taps * horizontal.count * channels;

function frame(problem: Problem): DirectFrame {
  const { horizontal, vertical } = problem;
  const base = frameOf(problem, sweepStagedRows(problem, operationsPerRow(problem)));
  const { arrangement } = base;
  const ringRows = vertical.taps + 1;
  return {
    ...base,
    ringRows,
    ringStride: base.extendedStride,
    taps: arrangement.take(horizontal.taps * vertical.taps * 4),
    ring: arrangement.take(ringRows * base.extendedStride),
    table: arrangement.take(2 * ringRows * 4),
    results: arrangement.take(2 * base.resultStride),
  };
}

/** Each tap is rounded once, each product once, each sum once. */
function error(problem: Problem): MethodError {
  return { relative: sumError(problem, problem.horizontal.taps * problem.vertical.taps + 1, problem.analysis.absoluteSum), absolute: underflow(problem) };
}

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

  program(problem) {
    const layout = frame(problem);
    return programOf(problem, layout, {
      fields: (job) => sweepFields(job, layout).pointer(field.TAPS, layout.taps),
      tables: [{ offset: layout.taps, data: floatTaps(problem) }, ringTables(layout, 1)],
      setup: [],
      steps: sweepSteps(problem, layout, "sweepDirect"),
      error: error(problem),
      round: false,
    });
  },
};
