import { laneBytes, loadLanes, multiplyAdd, splat, splatFrom, storeLanes } from "./lanes";

/** Bytes of an entry: i32 offset of its row in a pointer table, i32 bytes along the row, f32 tap. */
const ENTRY_BYTES: usize = 12;

/**
 * Correlates rows of floats with the taps of a kernel that are not 0.
 *
 *     out[x] = Σ_e tap[e] · rows[row[e]][x + column[e]],   e in the order of the taps, row by row
 *
 * A tap of 0 adds nothing, so sums are those of direct.ts, in the same order.
 *
 * Shapes    rows: pointers; entries: `count` of them; out: floats
 * Units     pointers and offsets: bytes; floats: a multiple of four or at least six vectors
 * Requires  rows readable for whole vectors; out apart from the rows
 * Cost      floats · count multiply–adds; allocates nothing
 * Accuracy  |error| ≤ γ(count) · Σ|taps| · max|rows|
 * Source    Higham, Accuracy and Stability of Numerical Algorithms, §3.1 (bound)
 */
export function correlateEntries<V>(out: usize, rows: usize, entries: usize, count: i32, floats: i32): void {
  const bytes = <usize>floats << 2;
  const block: usize = 6 * laneBytes<V>();
  const end = entries + <usize>count * ENTRY_BYTES;
  let x: usize = 0;
  for (; x + block <= bytes; x += block) entriesBlock<V>(out + x, rows, x, entries, end);
  if (x == bytes) return;
  if (bytes >= block) {
    x = bytes - block;
    entriesBlock<V>(out + x, rows, x, entries, end);
  } else {
    for (; x < bytes; x += laneBytes<V>()) entriesVector<V>(out + x, rows, x, entries, end);
  }
}

/** Six vectors of sums, six of samples and a tap: thirteen registers. */
function entriesBlock<V>(out: usize, rows: usize, x: usize, entry: usize, end: usize): void {
  const vector = laneBytes<V>();
  let a0 = splat<V>(0), a1 = a0, a2 = a0, a3 = a0, a4 = a0, a5 = a0;
  for (; entry < end; entry += ENTRY_BYTES) {
    const p = load<usize>(rows + load<usize>(entry)) + load<usize>(entry, 4) + x;
    const h = splatFrom<V>(entry + 8);
    a0 = multiplyAdd<V>(a0, h, loadLanes<V>(p));
    a1 = multiplyAdd<V>(a1, h, loadLanes<V>(p + vector));
    a2 = multiplyAdd<V>(a2, h, loadLanes<V>(p + 2 * vector));
    a3 = multiplyAdd<V>(a3, h, loadLanes<V>(p + 3 * vector));
    a4 = multiplyAdd<V>(a4, h, loadLanes<V>(p + 4 * vector));
    a5 = multiplyAdd<V>(a5, h, loadLanes<V>(p + 5 * vector));
  }
  storeLanes<V>(out, a0);
  storeLanes<V>(out + vector, a1);
  storeLanes<V>(out + 2 * vector, a2);
  storeLanes<V>(out + 3 * vector, a3);
  storeLanes<V>(out + 4 * vector, a4);
  storeLanes<V>(out + 5 * vector, a5);
}

/** One vector of sums, where a row is shorter than a block. */
function entriesVector<V>(out: usize, rows: usize, x: usize, entry: usize, end: usize): void {
  let a = splat<V>(0);
  for (; entry < end; entry += ENTRY_BYTES) {
    a = multiplyAdd<V>(a, splatFrom<V>(entry + 8), loadLanes<V>(load<usize>(rows + load<usize>(entry)) + load<usize>(entry, 4) + x));
  }
  storeLanes<V>(out, a);
}
