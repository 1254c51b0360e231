import { dotAdd, laneBytes, lanes, loadLanes, pairWords8, splatFrom, splatInteger, storeBytes, storeWords } from "../lanes";
import {
  ALPHA, CHANNELS, COLUMN_BIAS, COLUMN_SHIFT, COLUMN_TAPS, EXTENDED_COLUMNS, KERNEL_COLUMNS, KERNEL_ROWS, OUTPUT_COLUMNS, RESULT, RESULT_STRIDE, RING_ROWS,
  SUMS, SUM_BIAS, SUM_SHIFT, TAPS,
} from "../record";
import { firstNewRow, firstResultRow, outputRow } from "../sweep";
import { enterPaired, keepAlpha, pairsFrom } from "./pairs";

/**
 * Correlates down the columns of pairs of rows of bytes, two result rows at a time; results are 16-bit integers.
 *
 *     out_k[x] = ⌊(bias + Σ_p taps_k[p] · pairs[p][x]) ÷ 2^shift⌋,   k = 0, 1
 *
 * Shapes    rows: pointers to `pairs` pair rows of count pairs; taps: `pairs` entries of two pairs of taps; out0, out1: count words and slack
 * Units     pointers: bytes; count: samples, rounded up to whole blocks of four vectors
 * Requires  sums below 2³¹, results within 16 bits   (promised by planning/fixedPoint)
 * Cost      2 · count · pairs dot products of two; allocates nothing
 * Accuracy  exact sums; rounded down once
 */
export function pairsDown<V>(out0: usize, out1: usize, rows: usize, taps: usize, pairs: i32, count: i32, bias: i32, shift: i32): void {
  const vector = laneBytes<V>();
  const last = rows + (<usize>pairs << 2);
  const bytes = <usize>count << 2;
  const start = splatInteger<V>(bias);
  for (let x: usize = 0; x < bytes; x += 4 * vector) {
    let a0 = start, a1 = start, a2 = start, a3 = start;
    let b0 = start, b1 = start, b2 = start, b3 = start;
    for (let row = rows, tap = taps; row < last; row += 4, tap += 8) {
      const p = load<usize>(row) + x;
      const x0 = loadLanes<V>(p), x1 = loadLanes<V>(p + vector), x2 = loadLanes<V>(p + 2 * vector), x3 = loadLanes<V>(p + 3 * vector);
      const h = splatFrom<V>(tap);
      a0 = dotAdd<V>(a0, h, x0);
      a1 = dotAdd<V>(a1, h, x1);
      a2 = dotAdd<V>(a2, h, x2);
      a3 = dotAdd<V>(a3, h, x3);
      const lower = splatFrom<V>(tap + 4);
      b0 = dotAdd<V>(b0, lower, x0);
      b1 = dotAdd<V>(b1, lower, x1);
      b2 = dotAdd<V>(b2, lower, x2);
      b3 = dotAdd<V>(b3, lower, x3);
    }
    const out = x >> 1;
    storeWords<V>(out0 + out, a0, a1, shift);
    storeWords<V>(out0 + out + vector, a2, a3, shift);
    storeWords<V>(out1 + out, b0, b1, shift);
    storeWords<V>(out1 + out + vector, b2, b3, shift);
  }
}

/**
 * Correlates a row of pairs of neighbouring pixels with fixed-point taps.
 *
 *     out[x] = held(⌊(bias + Σ_q taps[q] · row[x + q·step]) ÷ 2^shift⌋),   held to 0 … 255, 0 ≤ q < pairs
 *
 * Shapes    row: count + (pairs − 1)·step pairs (pixel, next pixel); taps: `pairs` pairs; out: count bytes
 * Units     pointers and step: bytes, step two pixels of pairs; count: samples
 * Cost      count · pairs dot products of two; allocates nothing
 * Accuracy  exact sums; rounded down once
 */
export function pairsAlong<V>(out: usize, row: usize, taps: usize, pairs: i32, step: usize, count: i32, bias: i32, shift: i32): void {
  const samples = 4 * lanes<V>();
  const lag = <i32>((<usize>samples << 2) / step);
  let x = 0;
  if (<usize>lag * step == <usize>samples << 2 && lag < pairs) {
    for (; x + 2 * samples <= count; x += 2 * samples) twoBlocks<V>(out + x, row + (<usize>x << 2), taps, pairs, lag, step, bias, shift);
  }
  for (; x + samples <= count; x += samples) alongBlock<V>(out + x, row + (<usize>x << 2), taps, pairs, step, bias, shift);
  if (x == count) return;
  if (count >= samples) {
    x = count - samples;
    alongBlock<V>(out + x, row + (<usize>x << 2), taps, pairs, step, bias, shift);
  } else {
    for (; x < count; x++) alongSample(out + x, row + (<usize>x << 2), taps, pairs, step, bias, shift);
  }
}

/**
 * Two blocks side by side, the second one `lag` taps behind the first: where both are at work a vector of samples is loaded once for two sums.
 */
function twoBlocks<V>(out: usize, p: usize, taps: usize, pairs: i32, lag: i32, step: usize, bias: i32, shift: i32): void {
  const vector = laneBytes<V>();
  const behind = <usize>lag << 2;
  let a0 = splatInteger<V>(bias), a1 = a0, a2 = a0, a3 = a0;
  let b0 = a0, b1 = a0, b2 = a0, b3 = a0;
  let end = taps + behind;
  for (; taps < end; taps += 4, p += step) {
    const h = splatFrom<V>(taps);
    a0 = dotAdd<V>(a0, h, loadLanes<V>(p));
    a1 = dotAdd<V>(a1, h, loadLanes<V>(p + vector));
    a2 = dotAdd<V>(a2, h, loadLanes<V>(p + 2 * vector));
    a3 = dotAdd<V>(a3, h, loadLanes<V>(p + 3 * vector));
  }
  end += (<usize>pairs << 2) - behind;
  for (; taps < end; taps += 4, p += step) {
    const x0 = loadLanes<V>(p), x1 = loadLanes<V>(p + vector), x2 = loadLanes<V>(p + 2 * vector), x3 = loadLanes<V>(p + 3 * vector);
    const h = splatFrom<V>(taps);
    a0 = dotAdd<V>(a0, h, x0);
    a1 = dotAdd<V>(a1, h, x1);
    a2 = dotAdd<V>(a2, h, x2);
    a3 = dotAdd<V>(a3, h, x3);
    const g = splatFrom<V>(taps - behind);
    b0 = dotAdd<V>(b0, g, x0);
    b1 = dotAdd<V>(b1, g, x1);
    b2 = dotAdd<V>(b2, g, x2);
    b3 = dotAdd<V>(b3, g, x3);
  }
  for (taps -= behind; taps < end; taps += 4, p += step) {
    const g = splatFrom<V>(taps);
    b0 = dotAdd<V>(b0, g, loadLanes<V>(p));
    b1 = dotAdd<V>(b1, g, loadLanes<V>(p + vector));
    b2 = dotAdd<V>(b2, g, loadLanes<V>(p + 2 * vector));
    b3 = dotAdd<V>(b3, g, loadLanes<V>(p + 3 * vector));
  }
  const bytes = 4 * lanes<V>();
  storeBytes<V>(out, a0, a1, a2, a3, shift);
  storeBytes<V>(out + bytes, b0, b1, b2, b3, shift);
}

/** Four vectors of sums: their 16 samples leave together. */
function alongBlock<V>(out: usize, p: usize, taps: usize, pairs: i32, step: usize, bias: i32, shift: i32): void {
  const vector = laneBytes<V>();
  let a0 = splatInteger<V>(bias), a1 = a0, a2 = a0, a3 = a0;
  for (const end = taps + (<usize>pairs << 2); taps < end; taps += 4, p += step) {
    const h = splatFrom<V>(taps);
    a0 = dotAdd<V>(a0, h, loadLanes<V>(p));
    a1 = dotAdd<V>(a1, h, loadLanes<V>(p + vector));
    a2 = dotAdd<V>(a2, h, loadLanes<V>(p + 2 * vector));
    a3 = dotAdd<V>(a3, h, loadLanes<V>(p + 3 * vector));
  }
  storeBytes<V>(out, a0, a1, a2, a3, shift);
}

function alongSample(out: usize, p: usize, taps: usize, pairs: i32, step: usize, bias: i32, shift: i32): void {
  let sum = bias;
  for (const end = taps + (<usize>pairs << 2); taps < end; taps += 4, p += step) sum = dotAdd<i32>(sum, load<i32>(taps), load<i32>(p));
  store<u8>(out, max<i32>(0, min<i32>(255, sum >> shift)));
}

/** One result row from its column sums: neighbours in pairs, then along the row. */
function finishRow<V>(job: usize, words: usize, out: usize): void {
  const channels = load<i32>(job, CHANNELS);
  const pixel = <usize>channels << 1;
  const samples = load<i32>(job, EXTENDED_COLUMNS) * channels;
  const row = load<usize>(job, SUMS);
  for (let k = 0; k < samples; k += 8) {
    const at = words + (<usize>k << 1);
    pairWords8<V>(row + (<usize>k << 2), at, at + pixel);
  }
  const pairs = (load<i32>(job, KERNEL_COLUMNS) + 1) >> 1;
  const count = load<i32>(job, OUTPUT_COLUMNS) * channels;
  pairsAlong<V>(out, row, load<usize>(job, TAPS), pairs, <usize>channels << 3, count, load<i32>(job, SUM_BIAS), load<i32>(job, SUM_SHIFT));
}

/** Separable, bytes to bytes: down the columns of the ring, then along the rows; result rows from … to − 1, as in every sweep. */
export function sweepSeparableBytes<V>(job: usize, from: i32, to: i32): void {
  const n = load<i32>(job, KERNEL_ROWS);
  const words = load<usize>(job, RESULT);
  const lower = words + load<usize>(job, RESULT_STRIDE);
  const samples = load<i32>(job, EXTENDED_COLUMNS) * load<i32>(job, CHANNELS);
  const first = firstNewRow(job, from);
  const end = to + n - 1;
  let next = first;
  for (let row = firstResultRow(from); next < end; row += 2) {
    for (const last = min<i32>(row + n + 1, end); next < last; next++) enterPaired<V>(job, next, first, next + 1 == end);
    if (row >= to) return;
    pairsDown<V>(
      words, lower, pairsFrom(job, row), load<usize>(job, COLUMN_TAPS), load<i32>(job, RING_ROWS), samples, load<i32>(job, COLUMN_BIAS), load<i32>(job, COLUMN_SHIFT),
    );
    finishRow<V>(job, words, outputRow(job, row, from));
    if (row + 1 < to) finishRow<V>(job, lower, outputRow(job, row + 1, from));
    if (load<i32>(job, ALPHA) != 3) continue;
    keepAlpha(job, row, from);
    if (row + 1 < to) keepAlpha(job, row + 1, from);
  }
}
