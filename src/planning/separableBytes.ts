import * as field from "../generated/record.js";
import { byteCounts, type PairFrame } from "./directBytes.js";
import { biasOf, bytesThroughout, packed, pairsOfRows, tapsByPairs } from "./fixedPoint.js";
import { fixedVectors, type FixedVectors } from "./fixedVectors.js";
import { rowStride } from "./arrangement.js";
import { frameOf, programOf } from "./frame.js";
import type { MethodPlan } from "./method.js";
import { inCorrelationOrder, type Problem } from "./problem.js";
import { separable } from "./separable.js";
import { ringTables, sweepFields, sweepStagedRows, sweepSteps } from "./sweeps.js";

/** Pairs of rows in a ring, down the columns to 16-bit words, then along the rows. */
interface WordFrame extends PairFrame {
  columnTaps: number;
  wordStride: number;
  pairRow: number;
}

const pairsAlong = (taps: number): number => Math.ceil(taps / 2);

function frame(problem: Problem): WordFrame {
  const { horizontal, vertical, channels } = problem;
  const ringRows = pairsOfRows(vertical.taps);
  const base = frameOf(problem, sweepStagedRows(problem, (pairsAlong(horizontal.taps) + ringRows) * horizontal.count * channels));
  const { arrangement } = base;
  const byteStride = rowStride(horizontal.extended * channels + 16);
  const wordStride = rowStride(horizontal.extended * channels * 2 + 64);
  return {
    ...base,
    ringRows,
    ringStride: base.extendedStride,
    byteStride,
    wordStride,
    resultStride: wordStride,
    taps: arrangement.take(pairsAlong(horizontal.taps) * 4),
    columnTaps: arrangement.take(ringRows * 8),
    ring: arrangement.take(ringRows * base.extendedStride),
    table: arrangement.take(2 * ringRows * 4),
    bytes: arrangement.take(2 * byteStride),
    results: arrangement.take(2 * wordStride),
    pairRow: arrangement.take(base.extendedStride),
  };
}

function rowPairs(row: Float64Array): Int32Array<ArrayBuffer> {
  return Int32Array.from({ length: pairsAlong(row.length) }, (_, q) => packed(row[2 * q]!, row[2 * q + 1] ?? 0));
}

const vectors = (problem: Problem): FixedVectors => fixedVectors(problem) as FixedVectors;

export const separableBytes: MethodPlan = {
  name: "separable",
  variant: "bytes",

  applicable(problem) {
    if (!bytesThroughout(problem)) return "Samples and results are not bytes throughout.";
    const applies = separable.applicable(problem);
    if (applies !== true) return applies;
    const found = fixedVectors(problem);
    return typeof found === "string" ? found : true;
  },

  work(problem) {
    const { horizontal, vertical, channels } = problem;
    const layout = frame(problem);
    const rowPairsOfTwo = 2 * Math.ceil(vertical.count / 2);
    const extended = horizontal.extended * channels;
    return {
      setup: { setup: 1, setupTap: horizontal.taps * vertical.taps, setupByte: layout.arrangement.byteLength },
      run: {
        ...byteCounts(problem, layout),
        wordTap: rowPairsOfTwo * extended * layout.ringRows,
        wordSample: rowPairsOfTwo * extended,
        pairRowTap: vertical.count * layout.resultFloats * pairsAlong(horizontal.taps),
      },
      bytes: layout.arrangement.byteLength,
    };
  },

  errorBound: (problem) => vectors(problem).error,

  arithmetic(problem) {
    const { column, row, fraction } = vectors(problem);
    return `fixed point: 16-bit taps, exact sums down columns ÷ 2^${column.shift - fraction} to 16 bits, exact sums along rows ÷ 2^${row.shift + fraction}`;
  },

  terms: () => 1,

  program(problem) {
    const layout = frame(problem);
    const { column, row, fraction, error } = vectors(problem);
    const columnShift = column.shift - fraction;
    const rowShift = row.shift + fraction;
    return programOf(problem, layout, {
      fields: (job) =>
        sweepFields(job, layout)
          .pointer(field.TAPS, layout.taps)
          .pointer(field.COLUMN_TAPS, layout.columnTaps)
          .pointer(field.ENTERED, layout.bytes)
          .integer(field.ENTERED_STRIDE, layout.byteStride)
          .pointer(field.SUMS, layout.pairRow)
          .integer(field.COLUMN_BIAS, biasOf(0, columnShift))
          .integer(field.COLUMN_SHIFT, columnShift)
          .integer(field.SUM_BIAS, biasOf(problem.request.output.offset, rowShift))
          .integer(field.SUM_SHIFT, rowShift),
      tables: [
        { offset: layout.taps, data: rowPairs(inCorrelationOrder(problem, row.integers.slice())) },
        { offset: layout.columnTaps, data: tapsByPairs(inCorrelationOrder(problem, column.integers.slice()), problem.vertical.taps, 1) },
        ringTables(layout, 1),
      ],
      setup: [],
      steps: sweepSteps(problem, layout, "sweepSeparableBytes"),
      error: { relative: 0, absolute: error },
      round: false,
    });
  },
};
