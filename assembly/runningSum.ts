import { enterRow } from "./enter";
import { add, laneBytes, loadLanes, multiply, splat, storeLanes } from "./lanes";
import {
  CHANNELS, COLUMN_PHASE, ENTERED, ENTERED_STRIDE, KERNEL_COLUMNS, KERNEL_ROWS, OUTPUT_COLUMNS, RESULT, RESULT_FLOATS, ROW_PHASE, ROW_TABLE, SCALE, SUMS, TAPS,
} from "./record";
import { assertRunningSum, assertSweep } from "./promises";
import { scaleRow } from "./rows";
import { firstNewRow, leaveStaged, stagedRow } from "./sweep";

/*
 * Sums of floats over a window, at a cost that does not depend on its size; integers have integerSums.ts.
 *
 * Blocks are as long as the window. A window meets two neighbouring blocks: the tail of one (suffix sum) and the head of the next
 * (prefix sum). Nothing is ever subtracted, so nothing drifts and a NaN stays where it is. Blocks are counted from image sample 0,
 * so that a region gives the same bytes as the whole.  (van Herk 1992 and Gil & Werman 1993 use the same blocks for maxima.)
 */

/**
 * Sums inside the blocks of a row, in place and beside it; blocks of m pixels, the first one `phase` pixels in.
 *
 *     suffix[k] = Σ row[k] … row[last of its block]        row[k] ← Σ row[first of its block] … row[k]
 */
function blockSums<V>(suffix: usize, row: usize, pixels: i32, m: i32, phase: i32, channels: i32): void {
  const pixel = <usize>channels << 2;
  let start: usize = 0;
  for (let end = m - phase, next = 0; next < pixels; end += m) {
    next = min<i32>(end, pixels);
    const stop = <usize>next * pixel;
    if (channels == 1) blockOfOne<f32>(suffix, row, start, stop, 4);
    else if (channels == 4 && isVector<V>()) blockOfOne<V>(suffix, row, start, stop, 16);
    else for (let c: usize = 0; c < pixel; c += 4) blockOfOne<f32>(suffix + c, row + c, start, stop, pixel);
    start = stop;
  }
}

/** One block of one chain of sums: a channel, or four at once. */
// @ts-ignore: decorator
@inline
function blockOfOne<T>(suffix: usize, row: usize, start: usize, stop: usize, pixel: usize): void {
  let sum = loadLanes<T>(row + stop - pixel);
  storeLanes<T>(suffix + stop - pixel, sum);
  for (let at = stop - pixel; at > start; ) {
    at -= pixel;
    sum = add<T>(loadLanes<T>(row + at), sum);
    storeLanes<T>(suffix + at, sum);
  }
  sum = loadLanes<T>(row + start);
  for (let at = start + pixel; at < stop; at += pixel) {
    sum = add<T>(sum, loadLanes<T>(row + at));
    storeLanes<T>(row + at, sum);
  }
}

/** out[x] = suffix[x] + prefix[x + m − 1], or the prefix alone where the window is a whole block. */
function joinBlocks<V>(out: usize, prefix: usize, suffix: usize, columns: i32, m: i32, phase: i32, channels: i32): void {
  const pixel = <usize>channels << 2;
  const ahead = prefix + <usize>(m - 1) * pixel;
  const bytes = <usize>columns * pixel;
  for (let x: usize = 0; x < bytes; x += laneBytes<V>()) storeLanes<V>(out + x, add<V>(loadLanes<V>(suffix + x), loadLanes<V>(ahead + x)));
  for (let k = phase == 0 ? 0 : m - phase; k < columns; k += m) {
    const at = <usize>k * pixel;
    for (let c: usize = 0; c < pixel; c += 4) store<f32>(out + at + c, load<f32>(ahead + at + c));
  }
}

/** Horizontal sums of one extended row into a ring row. */
function sumRow<V>(job: usize, out: usize, row: i32, source: usize): void {
  const columns = load<i32>(job, OUTPUT_COLUMNS);
  const channels = load<i32>(job, CHANNELS);
  const m = load<i32>(job, KERNEL_COLUMNS);
  const entered = load<usize>(job, ENTERED);
  enterRow<V>(job, entered, row, source);
  scaleRow<V>(entered, (columns + m - 1) * channels, load<f32>(job, SCALE));
  const suffix = entered + load<usize>(job, ENTERED_STRIDE);
  const phase = load<i32>(job, COLUMN_PHASE);
  blockSums<V>(suffix, entered, columns + m - 1, m, phase, channels);
  joinBlocks<V>(out, entered, suffix, columns, m, phase, channels);
}

/** The ring rows of a finished block, last but one to first: row ← row + the row after it. */
function suffixDown<V>(job: usize, ring: usize, last: i32, count: i32, n: i32): void {
  const bytes = <usize>load<i32>(job, RESULT_FLOATS) << 2;
  for (let row = last - 1; row > last - count; row--) {
    const upper = load<usize>(ring + (<usize>(row % n) << 2));
    const lower = load<usize>(ring + (<usize>((row + 1) % n) << 2));
    for (let x: usize = 0; x < bytes; x += laneBytes<V>()) storeLanes<V>(upper + x, add<V>(loadLanes<V>(upper + x), loadLanes<V>(lower + x)));
  }
}

/** sums ← incoming at the start of a block, sums + incoming inside it: all that rows before the first full window need. */
function addFirstRow<V>(job: usize, incoming: usize, start: bool): void {
  const sums = load<usize>(job, SUMS);
  const bytes = <usize>load<i32>(job, RESULT_FLOATS) << 2;
  if (start) memory.copy(sums, incoming, bytes);
  else for (let x: usize = 0; x < bytes; x += laneBytes<V>()) storeLanes<V>(sums + x, add<V>(loadLanes<V>(sums + x), loadLanes<V>(incoming + x)));
}

/** The same, and result = tap · (suffix + sums), or tap · sums where the window is a whole block (suffix 0). */
function addRow<V>(job: usize, incoming: usize, start: bool, suffix: usize): void {
  const sums = load<usize>(job, SUMS);
  const result = load<usize>(job, RESULT);
  const bytes = <usize>load<i32>(job, RESULT_FLOATS) << 2;
  const tap = splat<V>(load<f32>(load<usize>(job, TAPS)));
  for (let x: usize = 0; x < bytes; x += laneBytes<V>()) {
    let sum = loadLanes<V>(incoming + x);
    if (!start) sum = add<V>(loadLanes<V>(sums + x), sum);
    storeLanes<V>(sums + x, sum);
    storeLanes<V>(result + x, multiply<V>(tap, suffix ? add<V>(loadLanes<V>(suffix + x), sum) : sum));
  }
}

/** Takes extended row `row` in and computes the result row of the window that ends with it, if it is full. */
function advanceFloats<V>(job: usize, ring: usize, row: i32, n: i32): void {
  const place = (load<i32>(job, ROW_PHASE) + row) % n;
  const incoming = load<usize>(ring + (<usize>(row % n) << 2));
  const whole = place == n - 1;
  if (row < n - 1) addFirstRow<V>(job, incoming, place == 0);
  else addRow<V>(job, incoming, place == 0, whole ? 0 : load<usize>(ring + (<usize>((row + 1) % n) << 2)));
  if (whole) suffixDown<V>(job, ring, row, min<i32>(n, row + 1), n);
}

/**
 * Running sums of floats: horizontal sums in a ring of n rows, vertical sums in one row. Result rows from … to − 1 as in every sweep.
 *
 *     y[r, c] = tap · Σ_j Σ_i x[r + j, c + i],   0 ≤ j < n, 0 ≤ i < m
 *
 * Requires  a ring of n rows of RESULT_FLOATS; COLUMN_PHASE < m, ROW_PHASE < n   (promised by planning/runningSum)
 * Cost      about 8 operations a sample, whatever m and n; allocates nothing
 * Accuracy  |error| ≤ γ(m + n + 1) · |tap| · m · n · max|x|
 */
export function sweepRunningSum<V>(job: usize, from: i32, to: i32): void {
  const n = load<i32>(job, KERNEL_ROWS);
  assertSweep(job, from, to, n);
  assertRunningSum(job);
  const ring = load<usize>(job, ROW_TABLE);
  const result = load<usize>(job, RESULT);
  const first = firstNewRow(job, from);
  for (let next = first; next < to + n - 1; next++) {
    const incoming = load<usize>(ring + (<usize>(next % n) << 2));
    sumRow<V>(job, incoming, next, stagedRow(job, next, first));
    advanceFloats<V>(job, ring, next, n);
    if (next >= n - 1) leaveStaged<V>(job, result, next - n + 1, from);
  }
}
