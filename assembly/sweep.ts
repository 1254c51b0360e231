import { correlateColumns } from "./columns";
import { correlateRows } from "./direct";
import { correlateRow } from "./rows";
import { correlateEntries } from "./sparse";
import { enterRow } from "./enter";
import { lanes } from "./lanes";
import { leaveRow, leavesAsIs } from "./leave";
import { assertSweep, assertTerms } from "./promises";
import {
  ALPHA, ANCHOR_ROW, CHANNELS, COLUMN_TAPS, ENTERED, KEEP_ROW, KEEP_STAGING, KERNEL_COLUMNS, KERNEL_ROWS,
  OUTPUT, OUTPUT_COLUMNS, OUTPUT_STRIDE, RESULT, RESULT_FLOATS, RESULT_ROWS, RESULT_ROW_STRIDE, RESULT_STRIDE, RING_ROWS, ROW_MAP, ROW_TABLE, SOURCE_ROWS,
  SOURCE_ROW_STRIDE, STAGING, STAGING_STRIDE, TAPS, TAP_ENTRIES, TERMS,
} from "./record";

/*
 * A sweep goes by extended rows, counted so that row k completes result row k: units −(kernelRows − 1) … resultRows − 1. A call
 * from … to − 1 enters extended rows from + kernelRows − 1 … to + kernelRows − 2, which are those that are staged, and computes result rows
 * max(from, 0) … to − 1. It starts with an empty ring at the first unit, else the ring holds the kernelRows − 1 extended rows before.
 */

/** First extended row that a call from unit `from` enters; 0 at the start of a sweep. */
// @ts-ignore: decorator
@inline
export function firstNewRow(job: usize, from: i32): i32 {
  return from + load<i32>(job, KERNEL_ROWS) - 1;
}

/** First result row that a call from unit `from` computes. */
// @ts-ignore: decorator
@inline
export function firstResultRow(from: i32): i32 {
  return max<i32>(from, 0);
}

/** The samples of extended row `row`: where they lie in the source, or staged as row `place`. Anywhere where the row map says "outside". */
// @ts-ignore: decorator
@inline
function sourceRow(job: usize, row: i32, staging: usize, place: i32): usize {
  const rows = load<usize>(job, SOURCE_ROWS);
  if (rows) return rows + <usize>load<i32>(load<usize>(job, ROW_MAP) + (<usize>row << 2)) * load<usize>(job, SOURCE_ROW_STRIDE);
  return staging + <usize>place * load<usize>(job, STAGING_STRIDE);
}

/** Samples of an extended row. */
// @ts-ignore: decorator
@inline
export function stagedRow(job: usize, row: i32, firstStaged: i32): usize {
  return sourceRow(job, row, load<usize>(job, STAGING), row - firstStaged);
}

/** Pointer table of the ring of one term, turned so that `row` comes first. */
// @ts-ignore: decorator
@inline
function ringFrom(job: usize, term: i32, row: i32): usize {
  const ringRows = load<i32>(job, RING_ROWS);
  return load<usize>(job, ROW_TABLE) + (<usize>(term * 2 * ringRows + (row % ringRows)) << 2);
}

/** Samples of the extended row that a result row's alpha is kept from. */
// @ts-ignore: decorator
@inline
export function keptRow(job: usize, row: i32, from: i32): usize {
  return sourceRow(job, row + load<i32>(job, ANCHOR_ROW), load<usize>(job, KEEP_STAGING), row - firstResultRow(from));
}

/** Where a result row goes. No byte past its last sample may be written. */
// @ts-ignore: decorator
@inline
export function outputRow(job: usize, row: i32, from: i32): usize {
  const rows = load<usize>(job, RESULT_ROWS);
  if (rows) return rows + <usize>row * load<usize>(job, RESULT_ROW_STRIDE);
  return load<usize>(job, OUTPUT) + <usize>(row - firstResultRow(from)) * load<usize>(job, OUTPUT_STRIDE);
}

/** Leaves one result row: enters the alpha row of `keep` before, where it is asked for. */
export function leaveStaged<V>(job: usize, y: usize, row: i32, from: i32): void {
  if (load<i32>(job, ALPHA) == 3) enterRow<V>(job, load<usize>(job, KEEP_ROW), row + load<i32>(job, ANCHOR_ROW), keptRow(job, row, from));
  leaveRow<V>(job, y, row, outputRow(job, row, from));
}

/** Floats that two result rows are computed in where they go, or 0: rows at least a block long whose floats are the samples that are written. */
function floatsInPlace<V>(job: usize): i32 {
  const floats = load<i32>(job, OUTPUT_COLUMNS) * load<i32>(job, CHANNELS);
  return floats >= 6 * lanes<V>() && leavesAsIs(job) ? floats : 0;
}

/** Where result row `row` or the one below is computed: in its place, or in a row of working floats. */
// @ts-ignore: decorator
@inline
function resultRow(job: usize, below: i32, row: i32, from: i32, to: i32, inPlace: i32): usize {
  if (inPlace && row + below < to) return outputRow(job, row + below, from);
  return load<usize>(job, RESULT) + <usize>below * load<usize>(job, RESULT_STRIDE);
}

// @ts-ignore: decorator
@inline
function leavePair<V>(job: usize, row: i32, from: i32, to: i32): void {
  const result = load<usize>(job, RESULT);
  leaveStaged<V>(job, result, row, from);
  if (row + 1 < to) leaveStaged<V>(job, result + load<usize>(job, RESULT_STRIDE), row + 1, from);
}

/** Direct: extended rows in the ring, all taps at once, or those of a list. */
export function sweepDirect<V>(job: usize, from: i32, to: i32): void {
  const n = load<i32>(job, KERNEL_ROWS);
  assertSweep(job, from, to, n + 1);
  const step = <usize>load<i32>(job, CHANNELS) << 2;
  const entries = load<i32>(job, TAP_ENTRIES);
  const inPlace = floatsInPlace<V>(job);
  const first = firstNewRow(job, from);
  const end = to + n - 1;
  let next = first;
  for (let row = firstResultRow(from); next < end; row += 2) {
    for (const last = min<i32>(row + n + 1, end); next < last; next++) enterRow<V>(job, load<usize>(ringFrom(job, 0, next)), next, stagedRow(job, next, first));
    if (row >= to) return; // a call that ends above the first result only enters
    const out0 = resultRow(job, 0, row, from, to, inPlace), out1 = resultRow(job, 1, row, from, to, inPlace);
    const floats = inPlace || load<i32>(job, RESULT_FLOATS);
    if (entries) {
      correlateEntries<V>(out0, ringFrom(job, 0, row), load<usize>(job, TAPS), entries, floats);
      if (row + 1 < to) correlateEntries<V>(out1, ringFrom(job, 0, row) + 4, load<usize>(job, TAPS), entries, floats);
    } else correlateRows<V>(out0, out1, ringFrom(job, 0, row), load<usize>(job, TAPS), n, load<i32>(job, KERNEL_COLUMNS), step, floats);
    if (!inPlace) leavePair<V>(job, row, from, to);
  }
}

/** Row passes of all terms over an entered row, into the rings. */
function rowPasses<V>(job: usize, row: i32): void {
  const m = load<i32>(job, KERNEL_COLUMNS);
  const step = <usize>load<i32>(job, CHANNELS) << 2;
  for (let term = 0; term < load<i32>(job, TERMS); term++) {
    const taps = load<usize>(job, TAPS) + (<usize>(term * m) << 2);
    correlateRow<V>(load<usize>(ringFrom(job, term, row)), load<usize>(job, ENTERED), taps, m, step, load<i32>(job, RESULT_FLOATS));
  }
}

/** Separable: row results in the rings, then columns; terms are summed in order. */
export function sweepSeparable<V>(job: usize, from: i32, to: i32): void {
  const n = load<i32>(job, KERNEL_ROWS);
  assertSweep(job, from, to, n + 1);
  assertTerms(job);
  const inPlace = load<i32>(job, TERMS) == 1 ? floatsInPlace<V>(job) : 0;
  const first = firstNewRow(job, from);
  const end = to + n - 1;
  let next = first;
  for (let row = firstResultRow(from); next < end; row += 2) {
    for (const last = min<i32>(row + n + 1, end); next < last; next++) {
      enterRow<V>(job, load<usize>(job, ENTERED), next, stagedRow(job, next, first));
      rowPasses<V>(job, next);
    }
    if (row >= to) return; // a call that ends above the first result only enters
    for (let term = 0; term < load<i32>(job, TERMS); term++) {
      const taps = load<usize>(job, COLUMN_TAPS) + (<usize>(term * n) << 2);
      correlateColumns<V>(
        resultRow(job, 0, row, from, to, inPlace), resultRow(job, 1, row, from, to, inPlace), ringFrom(job, term, row), taps, n,
        inPlace || load<i32>(job, RESULT_FLOATS), term > 0,
      );
    }
    if (!inPlace) leavePair<V>(job, row, from, to);
  }
}
