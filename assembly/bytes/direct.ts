import { dotAdd, laneBytes, loadLanes, splatFrom, splatInteger, storeBytes } from "../lanes";
import { ALPHA, CHANNELS, KERNEL_COLUMNS, KERNEL_ROWS, OUTPUT_COLUMNS, RESULT, RING_ROWS, SUM_BIAS, SUM_SHIFT, TAPS, TAP_ENTRIES } from "../record";
import { firstNewRow, firstResultRow, outputRow } from "../sweep";
import { enterPaired, keepAlpha, pairsFrom } from "./pairs";
import { correlatePairEntries } from "./sparse";

/**
 * Correlates pairs of rows of bytes with fixed-point taps, two result rows at a time.
 *
 *     out_k[x] = held(⌊(bias + Σ_p Σ_i taps_k[p, i] · pairs[p][x + i·step]) ÷ 2^shift⌋),   held to 0 … 255, k = 0, 1
 *
 * Shapes    rows: pointers to `pairs` pair rows of count + (m − 1)·step pairs; taps: `pairs` × m entries of two pairs of 16-bit taps, one
 *           for each result row; out0, out1: count bytes
 * Units     pointers and step: bytes; count: samples
 * Requires  Σ|taps| · 255 + |bias| < 2³¹   (promised by planning/fixedPoint)
 * Cost      2 · count · m · pairs dot products of two; allocates nothing
 * Accuracy  exact sums of integers, whatever their order
 */
export function correlatePairs<V>(out0: usize, out1: usize, rows: usize, taps: usize, pairs: i32, m: i32, step: usize, count: i32, bias: i32, shift: i32): void {
  const bytes = <usize>count << 2;
  const block: usize = 4 * laneBytes<V>();
  let x: usize = 0;
  for (; x + block <= bytes; x += block) pairsBlock<V>(out0 + (x >> 2), out1 + (x >> 2), rows, x, taps, pairs, m, step, bias, shift);
  if (x == bytes) return;
  if (bytes >= block) {
    x = bytes - block;
    pairsBlock<V>(out0 + (x >> 2), out1 + (x >> 2), rows, x, taps, pairs, m, step, bias, shift);
  } else {
    for (; x < bytes; x += 4) {
      pairsSample(out0 + (x >> 2), rows, x, taps, pairs, m, step, bias, shift);
      pairsSample(out1 + (x >> 2), rows, x, taps + 4, pairs, m, step, bias, shift);
    }
  }
}

/** Two rows × four vectors of sums, four vectors of samples and two taps: fourteen registers. */
function pairsBlock<V>(out0: usize, out1: usize, rows: usize, x: usize, taps: usize, pairs: i32, m: i32, step: usize, bias: i32, shift: i32): void {
  const vector = laneBytes<V>();
  let a0 = splatInteger<V>(bias), a1 = a0, a2 = a0, a3 = a0;
  let b0 = a0, b1 = a0, b2 = a0, b3 = a0;
  for (const last = rows + (<usize>pairs << 2); rows < last; rows += 4) {
    let p = load<usize>(rows) + x;
    for (const end = taps + (<usize>m << 3); taps < end; taps += 8, p += step) {
      const x0 = loadLanes<V>(p), x1 = loadLanes<V>(p + vector), x2 = loadLanes<V>(p + 2 * vector), x3 = loadLanes<V>(p + 3 * vector);
      const h = splatFrom<V>(taps);
      a0 = dotAdd<V>(a0, h, x0);
      a1 = dotAdd<V>(a1, h, x1);
      a2 = dotAdd<V>(a2, h, x2);
      a3 = dotAdd<V>(a3, h, x3);
      const lower = splatFrom<V>(taps + 4);
      b0 = dotAdd<V>(b0, lower, x0);
      b1 = dotAdd<V>(b1, lower, x1);
      b2 = dotAdd<V>(b2, lower, x2);
      b3 = dotAdd<V>(b3, lower, x3);
    }
  }
  storeBytes<V>(out0, a0, a1, a2, a3, shift);
  storeBytes<V>(out1, b0, b1, b2, b3, shift);
}

/** One sample of one row, where a row is shorter than a block. */
function pairsSample(out: usize, rows: usize, x: usize, taps: usize, pairs: i32, m: i32, step: usize, bias: i32, shift: i32): void {
  let sum = bias;
  for (const last = rows + (<usize>pairs << 2); rows < last; rows += 4) {
    let p = load<usize>(rows) + x;
    for (const end = taps + (<usize>m << 3); taps < end; taps += 8, p += step) sum = dotAdd<i32>(sum, load<i32>(taps), load<i32>(p));
  }
  store<u8>(out, max<i32>(0, min<i32>(255, sum >> shift)));
}

/** Direct, bytes to bytes: result rows from … to − 1, as in every sweep. */
export function sweepDirectBytes<V>(job: usize, from: i32, to: i32): void {
  const n = load<i32>(job, KERNEL_ROWS);
  const channels = load<i32>(job, CHANNELS);
  const entries = load<i32>(job, TAP_ENTRIES);
  const first = firstNewRow(job, from);
  const end = to + n - 1;
  let next = first;
  for (let row = firstResultRow(from); next < end; row += 2) {
    for (const last = min<i32>(row + n + 1, end); next < last; next++) enterPaired<V>(job, next, first, next + 1 == end);
    if (row >= to) return;
    const out0 = outputRow(job, row, from), out1 = row + 1 < to ? outputRow(job, row + 1, from) : load<usize>(job, RESULT);
    const count = load<i32>(job, OUTPUT_COLUMNS) * channels, bias = load<i32>(job, SUM_BIAS), shift = load<i32>(job, SUM_SHIFT);
    if (entries) correlatePairEntries<V>(out0, out1, pairsFrom(job, row), load<usize>(job, TAPS), entries, count, bias, shift);
    else {
      correlatePairs<V>(
        out0, out1, pairsFrom(job, row), load<usize>(job, TAPS), load<i32>(job, RING_ROWS), load<i32>(job, KERNEL_COLUMNS), <usize>channels << 2, count, bias, shift,
      );
    }
    if (load<i32>(job, ALPHA) != 3) continue;
    keepAlpha(job, row, from);
    if (row + 1 < to) keepAlpha(job, row + 1, from);
  }
}
