import { dotAdd, laneBytes, loadLanes, splatFrom, splatInteger, storeBytes } from "../lanes";

/** Bytes of an entry: i32 offset of its pair row in a pointer table, i32 bytes along the row, the taps of the upper and of the lower result row. */
const ENTRY_BYTES: usize = 16;

/**
 * Correlates pairs of rows of bytes with those pairs of fixed-point taps that are not 0: direct.ts by a list.
 *
 *     out_k[x] = held(⌊(bias + Σ_e taps_k[e] · pairs[row[e]][x + column[e]]) ÷ 2^shift⌋),   k = 0, 1
 *
 * Shapes    rows: pointers to pair rows; entries: `entryCount` of them; out0, out1: count bytes
 * Units     pointers and offsets: bytes; count: samples
 * Requires  Σ|taps| · 255 + |bias| < 2³¹   (promised by planning/fixedPoint)
 * Cost      2 · count · entryCount dot products of two; allocates nothing
 * Accuracy  exact sums of integers, whatever their order
 */
export function correlatePairEntries<V>(out0: usize, out1: usize, rows: usize, entries: usize, entryCount: i32, count: i32, bias: i32, shift: i32): void {
  const bytes = <usize>count << 2;
  const block: usize = 4 * laneBytes<V>();
  const end = entries + <usize>entryCount * ENTRY_BYTES;
  let x: usize = 0;
  for (; x + block <= bytes; x += block) pairEntriesBlock<V>(out0 + (x >> 2), out1 + (x >> 2), rows, x, entries, end, bias, shift);
  if (x == bytes) return;
  if (bytes >= block) {
    x = bytes - block;
    pairEntriesBlock<V>(out0 + (x >> 2), out1 + (x >> 2), rows, x, entries, end, bias, shift);
  } else {
    for (; x < bytes; x += 4) {
      pairEntriesSample(out0 + (x >> 2), rows, x, entries, end, 8, bias, shift);
      pairEntriesSample(out1 + (x >> 2), rows, x, entries, end, 12, bias, shift);
    }
  }
}

/** Two rows × four vectors of sums, as in direct.ts. */
function pairEntriesBlock<V>(out0: usize, out1: usize, rows: usize, x: usize, entry: usize, end: usize, bias: i32, shift: i32): void {
  const vector = laneBytes<V>();
  let a0 = splatInteger<V>(bias), a1 = a0, a2 = a0, a3 = a0;
  let b0 = a0, b1 = a0, b2 = a0, b3 = a0;
  for (; entry < end; entry += ENTRY_BYTES) {
    const p = load<usize>(rows + load<usize>(entry)) + load<usize>(entry, 4) + x;
    const x0 = loadLanes<V>(p), x1 = loadLanes<V>(p + vector), x2 = loadLanes<V>(p + 2 * vector), x3 = loadLanes<V>(p + 3 * vector);
    const upper = splatFrom<V>(entry + 8);
    a0 = dotAdd<V>(a0, upper, x0);
    a1 = dotAdd<V>(a1, upper, x1);
    a2 = dotAdd<V>(a2, upper, x2);
    a3 = dotAdd<V>(a3, upper, x3);
    const lower = splatFrom<V>(entry + 12);
    b0 = dotAdd<V>(b0, lower, x0);
    b1 = dotAdd<V>(b1, lower, x1);
    b2 = dotAdd<V>(b2, lower, x2);
    b3 = dotAdd<V>(b3, lower, x3);
  }
  storeBytes<V>(out0, a0, a1, a2, a3, shift);
  storeBytes<V>(out1, b0, b1, b2, b3, shift);
}

/** One sample of one row, where a row is shorter than a block; `taps` bytes into an entry lie those of the row. */
function pairEntriesSample(out: usize, rows: usize, x: usize, entry: usize, end: usize, taps: usize, bias: i32, shift: i32): void {
  let sum = bias;
  for (; entry < end; entry += ENTRY_BYTES) {
    sum = dotAdd<i32>(sum, load<i32>(entry + taps), load<i32>(load<usize>(rows + load<usize>(entry)) + load<usize>(entry, 4) + x));
  }
  store<u8>(out, max<i32>(0, min<i32>(255, sum >> shift)));
}
