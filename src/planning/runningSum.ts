import * as field from "../generated/record.js";
import { gamma } from "../math/rounding.js";
import { outputBound, sumError, underflow, type MethodError } from "./accuracy.js";
import { rowStride } from "./arrangement.js";
import type { Counts } from "./cost.js";
import { constantPixels, frameCounts, frameOf, programOf } from "./frame.js";
import type { MethodPlan } from "./method.js";
import { correlationTaps, vectorFloats, type Problem } from "./problem.js";
import { sampleFacts } from "./samples.js";
import { ringTables, sweepCalls, sweepFields, sweepStagedRows, sweepSteps, type SweepFrame } from "./sweeps.js";

/** A window of rows in a ring and one row of sums: a cost that does not depend on the kernel's size. */
interface RunningSumFrame extends SweepFrame {
  tap: number;
  entered: number;
  sums: number;
  /** Integer sums alone: samples of a raw row, and the one that stands outside by row. */
  rawSamples: number;
  rawConstant: number;
}

/** Integer sums stay below 2³² and need no rounding; what is not an integer is summed in blocks of floats. */
function integerSums(problem: Problem): boolean {
  const { request, horizontal, vertical } = problem;
  const facts = sampleFacts[request.sample];
  const integers = facts.integer && request.light === "encoded" && request.alpha !== "straight";
  return integers && horizontal.taps * vertical.taps * facts.full < 4294967296;
}

function frame(problem: Problem): RunningSumFrame {
  const base = frameOf(problem, sweepStagedRows(problem, 8 * problem.horizontal.count * problem.channels));
  const { arrangement, intake } = base;
  const integers = integerSums(problem);
  const rawSamples = integers ? 16 * Math.ceil(((intake.columns + 1) * problem.channels) / 16) : 0;
  const rawBytes = rawSamples << sampleFacts[problem.request.sample].code;
  const ringRows = integers ? problem.vertical.taps + 1 : problem.vertical.taps;
  const ringStride = integers ? rowStride(rawBytes) : base.resultStride;
  return {
    ...base,
    ringRows,
    ringStride,
    rawSamples,
    tap: arrangement.take(4),
    ring: arrangement.take(ringRows * ringStride),
    table: arrangement.take(2 * ringRows * 4),
    entered: arrangement.take((integers ? 1 : 2) * base.extendedStride),
    sums: arrangement.take(integers ? rawSamples * 4 : base.resultStride),
    results: arrangement.take(base.resultStride),
    rawConstant: arrangement.take(rawBytes),
  };
}

/** The raw row that stands outside by row: its rule's constant all along. */
function rawConstantRow(problem: Problem, layout: RunningSumFrame): Uint8Array | Uint16Array {
  const pixel = constantPixels(problem).subarray(0, problem.channels);
  const samples = (layout.intake.columns + 1) * problem.channels;
  const row = problem.request.sample === "u8" ? new Uint8Array(samples) : new Uint16Array(samples);
  return row.map((_, k) => pixel[k % problem.channels]!);
}

function error(problem: Problem): MethodError {
  const { horizontal, vertical, analysis, workingFull } = problem;
  if (integerSums(problem)) return { relative: gamma(3) * analysis.absoluteSum * workingFull, absolute: 0 };
  return { relative: sumError(problem, horizontal.taps + vertical.taps + 3, analysis.absoluteSum), absolute: underflow(problem) };
}

/** The power of two that keeps a float sum over the window no larger than its samples. */
function windowScale({ horizontal, vertical }: Problem): number {
  let scale = 1;
  while (horizontal.taps * vertical.taps * scale > 1) scale /= 2;
  return scale;
}

/** Position inside its block of the first sample that is read, blocks being counted from image sample 0. */
const phase = (first: number, taps: number): number => ((first % taps) + taps) % taps;

/** Sums that move along a row at the same time: one a channel, but four channels are one vector. */
const chains = (problem: Problem): number => (problem.channels === 4 && vectorFloats(problem) === 4 ? 1 : problem.channels);

/** Down the columns of the source first, then along the rows of results. */
function integerCounts(problem: Problem, { intake }: RunningSumFrame): Counts {
  const { horizontal, vertical, channels } = problem;
  return { integerColumnSum: vertical.extended * intake.columns * channels, integerSum: vertical.count * horizontal.extended * chains(problem) };
}

/** Along every row that is read first, then down. */
function floatCounts(problem: Problem): Counts {
  const { horizontal, vertical, channels } = problem;
  return { floatColumnSum: vertical.extended * horizontal.count * channels, floatSum: vertical.extended * horizontal.extended * chains(problem) };
}

export const runningSum: MethodPlan = {
  name: "running-sum",
  variant: "sums",

  applicable: (problem) => problem.analysis.constant || "The taps are not all the same number.",

  work(problem) {
    const { vertical, horizontal } = problem;
    const layout = frame(problem);
    return {
      setup: { setup: 1, setupTap: horizontal.taps * vertical.taps, setupByte: layout.arrangement.byteLength },
      run: {
        ...frameCounts(problem, vertical.extended, sweepCalls(problem, layout)),
        ...(integerSums(problem) ? integerCounts(problem, layout) : floatCounts(problem)),
      },
      bytes: layout.arrangement.byteLength,
    };
  },

  errorBound: (problem) => outputBound(problem, error(problem)),

  arithmetic: (problem) =>
    integerSums(problem) ? "32-bit integer running sums, scaled once in float32" : "float32 sums over blocks as long as the window, scaled once",

  program(problem) {
    const { horizontal, vertical } = problem;
    const layout = frame(problem);
    const integers = integerSums(problem);
    return programOf(problem, layout, {
      fields: (job) =>
        sweepFields(job, layout)
          .pointer(field.TAPS, layout.tap)
          .pointer(field.ENTERED, layout.entered)
          .integer(field.ENTERED_STRIDE, layout.extendedStride)
          .integer(field.COLUMN_PHASE, phase(horizontal.first, horizontal.taps))
          .integer(field.ROW_PHASE, phase(vertical.first, vertical.taps))
          .float(field.SCALE, windowScale(problem))
          .pointer(field.SUMS, layout.sums)
          .integer(field.RAW_SAMPLES, layout.rawSamples)
          .pointer(field.RAW_CONSTANT, layout.rawConstant),
      tables: [
        { offset: layout.tap, data: Float32Array.of(correlationTaps(problem)[0]! / (integers ? 1 : windowScale(problem))) },
        ringTables(layout, 1),
        ...(integers ? [{ offset: layout.rawConstant, data: rawConstantRow(problem, layout) }] : []),
      ],
      setup: [],
      steps: sweepSteps(problem, layout, integers ? "sweepIntegerSums" : "sweepRunningSum"),
      error: error(problem),
      round: false,
    });
  },
};
