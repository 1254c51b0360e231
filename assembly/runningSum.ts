import { enterRow } from "./enter";
import { add, laneBytes, loadLanes, multiply, splat, storeLanes } from "./lanes";
import {
  CHANNELS, COLUMN_PHASE, ENTERED, ENTERED_STRIDE, KERNEL_COLUMNS, KERNEL_ROWS, OUTPUT_COLUMNS, RESULT, RESULT_FLOATS, ROW_PHASE, ROW_TABLE, SCALE, SUMS, TAPS,
} from "./record";
import { assertRunningSum, assertSweep } from "./promises";
import { scaleRow } from "./fft/strips";
import { firstNewRow, leaveStaged, stagedRow } from "./sweep";

/*
 * Sums of floats over a window, at a cost that does not depend on its size; integers have integerSums.ts.
 *
 * Blocks are as long as the window. A window meets two neighbouring blocks: the tail of one (suffix sum) and the head of the next
 * (prefix sum). Nothing is ever subtracted, so nothing drifts and a NaN stays where it is. Blocks are counted from image sample 0,
 * so that a region gives the same bytes as the whole.  (van Herk 1992 and Gil & Werman 1993 use the same blocks for maxima.)
 */

/** row[k] ← Σ row[k] … row[end of its block], in floats; blocks of m pixels, the first one `phase` pixels in. */
function suffixSums(out: usize, row: usize, columns: i32, m: i32, phase: i32, channels: i32): void {
  const pixel = <usize>channels << 2;
  for (let c: usize = 0; c < pixel; c += 4) {
    let place = (phase + columns - 1) % m;
    let sum: f32 = 0;
    for (let k = columns - 1; k >= 0; k--) {
      const at = <usize>k * pixel + c;
      sum = place == m - 1 ? load<f32>(row + at) : load<f32>(row + at) + sum;
      store<f32>(out + at, sum);
      place = place == 0 ? m - 1 : place - 1;
    }
  }
}

/** out[x] = suffix[x] + prefix(x + m − 1), or the prefix alone where the window is a whole block. */
function slideFloats(out: usize, row: usize, suffix: usize, columns: i32, m: i32, phase: i32, channels: i32): void {
  const pixel = <usize>channels << 2;
  const extended = columns + m - 1;
  for (let c: usize = 0; c < pixel; c += 4) {
    let place = phase;
    let prefix: f32 = 0;
    for (let k = 0; k < extended; k++) {
      const x = load<f32>(row + <usize>k * pixel + c);
      prefix = place == 0 ? x : prefix + x;
      if (k >= m - 1) {
        const at = <usize>(k - m + 1) * pixel + c;
        store<f32>(out + at, place == m - 1 ? prefix : load<f32>(suffix + at) + prefix);
      }
      place = place == m - 1 ? 0 : place + 1;
    }
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
  suffixSums(suffix, entered, columns + m - 1, m, phase, channels);
  slideFloats(out, entered, suffix, columns, m, phase, channels);
}

/** sums ← incoming, or sums + incoming inside a block. */
function prefixDown<V>(job: usize, incoming: usize, start: bool): void {
  const sums = load<usize>(job, SUMS);
  const bytes = <usize>load<i32>(job, RESULT_FLOATS) << 2;
  for (let x: usize = 0; x < bytes; x += laneBytes<V>()) {
    const y = loadLanes<V>(incoming + x);
    storeLanes<V>(sums + x, start ? y : add<V>(loadLanes<V>(sums + x), y));
  }
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

/** result = tap · (suffix + sums), or tap · sums where the window is a whole block. */
function closeWindow<V>(job: usize, suffix: usize, result: usize): void {
  const sums = load<usize>(job, SUMS);
  const bytes = <usize>load<i32>(job, RESULT_FLOATS) << 2;
  const tap = splat<V>(load<f32>(load<usize>(job, TAPS)));
  for (let x: usize = 0; x < bytes; x += laneBytes<V>()) {
    const y = loadLanes<V>(sums + x);
    storeLanes<V>(result + x, multiply<V>(tap, suffix ? add<V>(loadLanes<V>(suffix + x), y) : y));
  }
}

/** Takes extended row `row` in and, once a window is full, computes its result row. */
function advanceFloats<V>(job: usize, ring: usize, row: i32, n: i32): void {
  const place = (load<i32>(job, ROW_PHASE) + row) % n;
  const incoming = load<usize>(ring + (<usize>(row % n) << 2));
  prefixDown<V>(job, incoming, place == 0);
  const whole = place == n - 1;
  const suffix: usize = whole ? 0 : load<usize>(ring + (<usize>((row + 1) % n) << 2));
  if (row >= n - 1) closeWindow<V>(job, suffix, load<usize>(job, RESULT));
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
