import { laneBytes, loadLanes, multiplyAdd, splat, splatFrom, storeLanes } from "./lanes";
import { assertCorrelation } from "./promises";

/**
 * Correlates rows of floats with taps, two result rows at a time.
 *
 *     out_k[x] = Σ_j Σ_i taps[j, i] · rows[k + j][x + i·step],   0 ≤ j < n, 0 ≤ i < m, k = 0, 1
 *
 * The sum runs over j, then i, whatever the block: no result depends on its neighbours.
 *
 * Shapes    rows: n + 1 pointers to rows of count + (m − 1)·step floats; taps n × m; out0, out1: count floats
 * Units     pointers: bytes; count: floats, a multiple of four or at least four vectors; step: bytes from one tap to the next in a row
 * Requires  rows readable for whole vectors; out0, out1 apart from the rows; row n may be any readable row if out1 is not wanted
 * Cost      2 · count · m · n multiply–adds; allocates nothing
 * Accuracy  |error| ≤ γ(m·n) · Σ|taps| · max|rows|
 * Source    Higham, Accuracy and Stability of Numerical Algorithms, §3.1 (bound)
 */
export function correlateRows<V>(out0: usize, out1: usize, rows: usize, taps: usize, n: i32, m: i32, step: usize, count: i32): void {
  assertCorrelation(out0, out1, rows, taps, n, m, step, count);
  const bytes = <usize>count << 2;
  const block: usize = 4 * laneBytes<V>();
  let x: usize = 0;
  for (; x + block <= bytes; x += block) correlateBlock<V>(out0 + x, out1 + x, rows, x, taps, n, m, step);
  if (x == bytes) return;
  if (bytes >= block) {
    x = bytes - block;
    correlateBlock<V>(out0 + x, out1 + x, rows, x, taps, n, m, step);
  } else {
    for (; x < bytes; x += laneBytes<V>()) correlateVector<V>(out0 + x, out1 + x, rows, x, taps, n, m, step);
  }
}

/**
 * Two rows × four vectors of sums. Rows 1 … n − 1 serve both result rows: their four vectors are loaded once and meet two taps, so that
 * sums (8), samples (4) and taps (2) stay within sixteen registers even where a compiler hoists every load of the block.
 * Row 0 belongs to the upper result alone and row n to the lower one: no sample meets a tap that it should not, not even a tap of 0.
 */
function correlateBlock<V>(out0: usize, out1: usize, rows: usize, x: usize, taps: usize, n: i32, m: i32, step: usize): void {
  const vector = laneBytes<V>();
  const tapRow = <usize>m << 2;
  const last = rows + (<usize>n << 2);
  let a0 = splat<V>(0), a1 = a0, a2 = a0, a3 = a0;
  let b0 = a0, b1 = a0, b2 = a0, b3 = a0;
  let p = load<usize>(rows) + x;
  let end = taps + tapRow;
  for (; taps < end; taps += 4, p += step) {
    const h = splatFrom<V>(taps);
    a0 = multiplyAdd<V>(a0, h, loadLanes<V>(p));
    a1 = multiplyAdd<V>(a1, h, loadLanes<V>(p + vector));
    a2 = multiplyAdd<V>(a2, h, loadLanes<V>(p + 2 * vector));
    a3 = multiplyAdd<V>(a3, h, loadLanes<V>(p + 3 * vector));
  }
  for (rows += 4; rows < last; rows += 4) {
    p = load<usize>(rows) + x;
    end = taps + tapRow;
    for (; taps < end; taps += 4, p += step) {
      const x0 = loadLanes<V>(p), x1 = loadLanes<V>(p + vector), x2 = loadLanes<V>(p + 2 * vector), x3 = loadLanes<V>(p + 3 * vector);
      const h = splatFrom<V>(taps);
      a0 = multiplyAdd<V>(a0, h, x0);
      a1 = multiplyAdd<V>(a1, h, x1);
      a2 = multiplyAdd<V>(a2, h, x2);
      a3 = multiplyAdd<V>(a3, h, x3);
      const above = splatFrom<V>(taps - tapRow);
      b0 = multiplyAdd<V>(b0, above, x0);
      b1 = multiplyAdd<V>(b1, above, x1);
      b2 = multiplyAdd<V>(b2, above, x2);
      b3 = multiplyAdd<V>(b3, above, x3);
    }
  }
  p = load<usize>(last) + x;
  for (taps -= tapRow; taps < end; taps += 4, p += step) {
    const h = splatFrom<V>(taps);
    b0 = multiplyAdd<V>(b0, h, loadLanes<V>(p));
    b1 = multiplyAdd<V>(b1, h, loadLanes<V>(p + vector));
    b2 = multiplyAdd<V>(b2, h, loadLanes<V>(p + 2 * vector));
    b3 = multiplyAdd<V>(b3, h, loadLanes<V>(p + 3 * vector));
  }
  storeLanes<V>(out0, a0);
  storeLanes<V>(out0 + vector, a1);
  storeLanes<V>(out0 + 2 * vector, a2);
  storeLanes<V>(out0 + 3 * vector, a3);
  storeLanes<V>(out1, b0);
  storeLanes<V>(out1 + vector, b1);
  storeLanes<V>(out1 + 2 * vector, b2);
  storeLanes<V>(out1 + 3 * vector, b3);
}

/** The same for one vector of each row, where a row is shorter than a block. */
function correlateVector<V>(out0: usize, out1: usize, rows: usize, x: usize, taps: usize, n: i32, m: i32, step: usize): void {
  let a = splat<V>(0);
  let b = splat<V>(0);
  const end = rows + (<usize>n << 2);
  for (; rows < end; rows += 4) {
    let p = load<usize>(rows) + x;
    let q = load<usize>(rows, 4) + x;
    const tapsEnd = taps + (<usize>m << 2);
    for (; taps < tapsEnd; taps += 4) {
      const h = splatFrom<V>(taps);
      a = multiplyAdd<V>(a, h, loadLanes<V>(p));
      b = multiplyAdd<V>(b, h, loadLanes<V>(q));
      p += step;
      q += step;
    }
  }
  storeLanes<V>(out0, a);
  storeLanes<V>(out1, b);
}
