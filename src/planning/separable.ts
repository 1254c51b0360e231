import * as field from "../generated/record.js";
import { absoluteSum, negligible, type SeparableTerm } from "../math/separation.js";
import { integerResults, leastWeight, outputBound, outputScale, sumError, underflow, type MethodError } from "./accuracy.js";
import { mostTerms } from "./analysis.js";
import { frameCounts, frameOf, programOf } from "./frame.js";
import type { MethodPlan } from "./method.js";
import { inCorrelationOrder, type Problem } from "./problem.js";
import { sampleFacts } from "./samples.js";
import { pairBlocks, rowBlocks, ringTables, sweepCalls, sweepFields, sweepStagedRows, sweepSteps, type SweepFrame } from "./sweeps.js";
import { floatVector, termLeftOut } from "./tiny.js";

/** Row results in one ring a term, then columns: r·(m + n) multiply–adds a sample for a sum of r separable terms. */
interface SeparableFrame extends SweepFrame {
  terms: number;
  rowTaps: number;
  columnTaps: number;
  entered: number;
}

/**
 * Σ|taps left out| that the caller's tolerance allows. Whatever is divided by less than all of the weight afterwards is allowed that much
 * less: by the inside weight of a renormalised border, by alpha down to half a level of it.
 */
function allowedResidual(problem: Problem): number {
  const { tolerance, alpha, output } = problem.request;
  const leastAlpha = alpha === "straight" ? 0.5 / sampleFacts[output.sample].full : 1;
  return (tolerance * leastWeight(problem) * leastAlpha) / Math.max(1e-300, outputScale(problem) * problem.workingFull);
}

/** The same, or what double precision leaves anyway. */
const acceptedResidual = (problem: Problem): number => Math.max(allowedResidual(problem), negligible * leastWeight(problem) * problem.analysis.absoluteSum);

/** No terms need be looked for: any that there could be would leave more than twice of what is accepted. */
const isHopeless = (problem: Problem): boolean => problem.analysis.leastLeft() > 2 * acceptedResidual(problem);

/** The fewest terms whose residual is accepted; nothing where there are none. An all-zero kernel takes one term of zeros. */
function termsNeeded(problem: Problem): number | undefined {
  if (isHopeless(problem)) return undefined;
  const { residuals } = problem.analysis.separation();
  const accepted = acceptedResidual(problem);
  const count = residuals.findIndex((residual, r) => r > 0 && residual <= accepted);
  return count > 0 ? count : residuals[0] === 0 ? 0 : undefined;
}

export function termsOf(problem: Problem): SeparableTerm[] {
  const { terms } = problem.analysis.separation();
  const count = termsNeeded(problem)!;
  if (count > 0) return terms.slice(0, count);
  return [{ column: new Float64Array(problem.vertical.taps), row: new Float64Array(problem.horizontal.taps) }];
}

const operationsPerRow = ({ horizontal, vertical, channels }: Problem, terms: number): number =>
  terms * (horizontal.taps + vertical.taps) * horizontal.count * channels;

function frame(problem: Problem): SeparableFrame {
  const { horizontal, vertical } = problem;
  const terms = termsOf(problem).length;
  const base = frameOf(problem, sweepStagedRows(problem, operationsPerRow(problem, terms)));
  const { arrangement } = base;
  const ringRows = vertical.taps + 1;
  return {
    ...base,
    terms,
    ringRows,
    ringStride: base.resultStride,
    rowTaps: arrangement.take(terms * horizontal.taps * 4),
    columnTaps: arrangement.take(terms * vertical.taps * 4),
    ring: arrangement.take(terms * ringRows * base.resultStride),
    table: arrangement.take(terms * 2 * ringRows * 4),
    entered: arrangement.take(base.extendedStride),
    results: arrangement.take(2 * base.resultStride),
  };
}

/** Each vector's taps are rounded once, and a result passes through the sums of a row, of a column and of the terms. */
function error(problem: Problem): MethodError {
  const terms = termsOf(problem);
  const weight = terms.reduce((sum, { column, row }) => sum + absoluteSum(column) * absoluteSum(row), 0);
  const roundings = problem.horizontal.taps + terms.length * problem.vertical.taps + 3;
  const dropped = problem.analysis.separation().residuals[termsNeeded(problem)!]!;
  const sums = sumError(problem, roundings, weight);
  const leftOut = terms.reduce((sum, { column, row }) => sum + termLeftOut(column, row), 0);
  const oneSign = terms.length === 1;
  return { relative: oneSign ? sums : 0, absolute: (oneSign ? 0 : sums) + dropped * problem.workingFull + underflow(problem, leftOut, weight) };
}

/** Several terms seldom consist of integers: where the results must, what the terms added is taken away again. */
const roundable = (problem: Problem): boolean => termsOf(problem).length > 1 && integerResults(problem) && error(problem).absolute < 0.5;

/** Vectors of all terms, one after the other, in correlation order. */
function stacked(problem: Problem, part: "row" | "column"): Float32Array<ArrayBuffer> {
  const other = part === "row" ? "column" : "row";
  return Float32Array.from(termsOf(problem).flatMap((term) => Array.from(floatVector(inCorrelationOrder(problem, term[part]), term[other]))));
}

export const separable: MethodPlan = {
  name: "separable",
  variant: "floats",

  applicable(problem) {
    if (termsNeeded(problem) !== undefined) return true;
    const hopeless = isHopeless(problem);
    const { analysis } = problem;
    const residuals = hopeless ? [] : analysis.separation().residuals;
    const left = Number(((hopeless ? analysis.leastLeft() : residuals.at(-1)!) * outputScale(problem) * problem.workingFull).toPrecision(2));
    return `The taps are no sum of at most ${hopeless ? mostTerms : Math.min(mostTerms, residuals.length - 1)} separable terms: ${hopeless ? "at least " : ""}${left} levels would be left out, the tolerance is ${problem.request.tolerance}.`;
  },

  work(problem) {
    const { horizontal, vertical } = problem;
    const layout = frame(problem);
    const rows = rowBlocks(problem, layout);
    const columns = pairBlocks(problem, layout);
    return {
      setup: { setup: 1, setupTap: horizontal.taps * vertical.taps, setupByte: layout.arrangement.byteLength },
      run: {
        ...frameCounts(problem, vertical.extended, sweepCalls(problem, layout)),
        rowTap: layout.terms * rows.floats * horizontal.taps,
        rowLoop: layout.terms * rows.blocks,
        columnTap: layout.terms * columns.floats * vertical.taps,
        columnLoop: layout.terms * columns.blocks,
      },
      bytes: layout.arrangement.byteLength,
      leastCall: 2 * operationsPerRow(problem, layout.terms),
    };
  },

  errorBound: (problem) => outputBound(problem, error(problem)),

  arithmetic(problem) {
    const terms = termsOf(problem).length;
    return `float32 sums along rows, then down columns, ${terms} ${terms === 1 ? "term" : "terms"}${roundable(problem) ? ", rounded to the exact integers" : ""}`;
  },

  terms: (problem) => termsOf(problem).length,

  program(problem) {
    const layout = frame(problem);
    return programOf(problem, layout, {
      fields: (job) =>
        sweepFields(job, layout)
          .pointer(field.TAPS, layout.rowTaps)
          .pointer(field.COLUMN_TAPS, layout.columnTaps)
          .integer(field.TERMS, layout.terms)
          .pointer(field.ENTERED, layout.entered),
      tables: [
        { offset: layout.rowTaps, data: stacked(problem, "row") },
        { offset: layout.columnTaps, data: stacked(problem, "column") },
        ringTables(layout, layout.terms),
      ],
      setup: [],
      steps: sweepSteps(problem, layout, "sweepSeparable"),
      error: error(problem),
      round: roundable(problem),
    });
  },
};
