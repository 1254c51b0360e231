import * as field from "../generated/record.js";
import { gamma } from "../math/rounding.js";
import { outputBound, type MethodError } from "./accuracy.js";
import { rowStride } from "./arrangement.js";
import { byteSums, type ByteSums } from "./byteSums.js";
import { bytesThroughout } from "./fixedPoint.js";
import { constantPixels, frameCounts, frameOf, programOf, stretchOf } from "./frame.js";
import type { MethodPlan } from "./method.js";
import { correlationTaps, type Problem } from "./problem.js";
import { ringTables, sweepCalls, sweepFields, sweepStagedRows, sweepSteps, type SweepFrame } from "./sweeps.js";

/** Column sums as an extended row, and the window's rows as the bytes that they are. */
interface ByteSumsFrame extends SweepFrame {
  /** The extended row of column sums, and where the sums of staged columns lie: in it, where all of those are neighbours. */
  entered: number;
  sums: number;
  rawConstant: number;
}

/** Before the extended row: a pixel of zeros, and the sums of what stands outside by column. */
const headBytes = 64;
/** Behind it: a step of a row reads sixteen sums at a time. */
const slackBytes = 128;

function scalingOf(problem: Problem): ByteSums | undefined {
  const { horizontal, vertical, request } = problem;
  return byteSums(horizontal.taps, vertical.taps, request.output.gain * correlationTaps(problem)[0]!, request.output.offset);
}

function frame(problem: Problem): ByteSumsFrame {
  const { horizontal, vertical, channels } = problem;
  const base = frameOf(problem, sweepStagedRows(problem, 3 * horizontal.count * channels));
  const { arrangement, intake } = base;
  const sumBytes = scalingOf(problem)!.divisor ? 4 : 2;
  const stretch = stretchOf(horizontal);
  const stagedBytes = intake.columns * channels;
  const ringStride = rowStride(stagedBytes);
  const entered = arrangement.take(headBytes + horizontal.extended * channels * sumBytes + slackBytes) + headBytes;
  return {
    ...base,
    entered,
    sums: stretch.count === intake.columns ? entered + stretch.column * channels * sumBytes : arrangement.take(stagedBytes * sumBytes),
    ringRows: vertical.taps,
    ringStride,
    ring: arrangement.take(vertical.taps * ringStride),
    table: arrangement.take(2 * vertical.taps * 4),
    results: arrangement.take(base.resultStride),
    rawConstant: arrangement.take(stagedBytes),
  };
}

/** The row that stands outside by row: its rule's constant all along. */
function rawConstantRow(problem: Problem, layout: ByteSumsFrame): Uint8Array<ArrayBuffer> {
  const pixel = constantPixels(problem);
  return Uint8Array.from({ length: layout.intake.columns * problem.channels }, (_, k) => pixel[k % problem.channels]!);
}

/** Results are those of the exact sum and the tap in double precision, but for ties of a tap that is 1 ÷ an integer within its rounding. */
function error({ analysis, workingFull }: Problem): MethodError {
  return { relative: gamma(1) * analysis.absoluteSum * workingFull, absolute: 0 };
}

export const runningSumBytes: MethodPlan = {
  name: "running-sum",
  variant: "bytes",

  applicable(problem) {
    if (!problem.analysis.constant) return "The taps are not all the same number.";
    if (!bytesThroughout(problem)) return "Samples and results are not bytes throughout.";
    return scalingOf(problem) !== undefined || "Results may leave 0 … 255, or lie too near to ties.";
  },

  work(problem) {
    const { horizontal, vertical, channels } = problem;
    const layout = frame(problem);
    const calls = sweepCalls(problem, layout);
    return {
      setup: { setup: 1, setupTap: horizontal.taps * vertical.taps, setupByte: layout.arrangement.byteLength },
      run: {
        ...frameCounts(problem, vertical.extended, calls),
        enter_u8: 0,
        leave_u8: 0,
        alphaPixel: 0,
        keptPixel: problem.request.alpha === "keep" ? horizontal.count * vertical.count : 0,
        haloPixel: vertical.count * (horizontal.extended - stretchOf(horizontal).count),
        byteColumnSum: vertical.extended * layout.intake.columns * channels,
        byteRowSum: vertical.count * (horizontal.extended + horizontal.count) * channels,
      },
      bytes: layout.arrangement.byteLength,
    };
  },

  errorBound: (problem) => outputBound(problem, error(problem)),

  arithmetic: () => "integer running sums, rounded to the nearest byte",

  program(problem) {
    const layout = frame(problem);
    const { bias, scale, divisor } = scalingOf(problem)!;
    return programOf(problem, layout, {
      fields: (job) =>
        sweepFields(job, layout)
          .pointer(field.ENTERED, layout.entered)
          .pointer(field.SUMS, layout.sums)
          .pointer(field.RAW_CONSTANT, layout.rawConstant)
          .integer(field.SUM_BIAS, bias)
          .float(field.SCALE, scale)
          .integer(field.DIVISOR, divisor),
      tables: [ringTables(layout, 1), { offset: layout.rawConstant, data: rawConstantRow(problem, layout) }],
      setup: [],
      steps: sweepSteps(problem, layout, "sweepByteSums"),
      error: error(problem),
      round: false,
    });
  },
};
