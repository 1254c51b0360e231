import { laneBytes, loadLanes, multiplyAdd, splat, splatFrom, storeLanes } from "./lanes";
import { assertCorrelation } from "./promises";

/**
 * Correlates down the columns, two result rows at a time; each row is read once for both.
 *
 *     out_k[x] = base_k[x] + Σ_j taps[j] · rows[k + j][x],   0 ≤ j < n, k = 0, 1
 *
 * with base_k = out_k where `accumulate` (a further term of a sum), else 0.
 *
 * Shapes    rows: n + 1 pointers to rows of count floats; taps n; out0, out1: count floats
 * Units     pointers: bytes; count: floats, a multiple of four or at least four vectors
 * Requires  out0, out1 apart from each other and from the rows; row n may be any readable row if out1 is not wanted
 * Cost      2 · count · n multiply–adds; allocates nothing
 * Accuracy  |error| ≤ γ(n + 1) · (Σ|taps| · max|rows| + max|base|)
 * Source    Higham, Accuracy and Stability of Numerical Algorithms, §3.1 (bound)
 */
export function correlateColumns<V>(out0: usize, out1: usize, rows: usize, taps: usize, n: i32, count: i32, accumulate: bool): void {
  assertCorrelation(out0, out1, rows, taps, n, 1, 0, count);
  const bytes = <usize>count << 2;
  const block: usize = 4 * laneBytes<V>();
  let x: usize = 0;
  for (; x + block <= bytes; x += block) columnsBlock<V>(out0 + x, out1 + x, rows, x, taps, n, accumulate);
  if (x == bytes) return;
  if (bytes >= block && !accumulate) {
    x = bytes - block;
    return columnsBlock<V>(out0 + x, out1 + x, rows, x, taps, n, false);
  }
  for (; x < bytes; x += laneBytes<V>()) columnsVector<V>(out0 + x, out1 + x, rows, x, taps, n, accumulate);
}

/** Two rows × four vectors of sums: see direct.ts for why the rows between meet two taps each. */
function columnsBlock<V>(out0: usize, out1: usize, rows: usize, x: usize, taps: usize, n: i32, accumulate: bool): void {
  const vector = laneBytes<V>();
  const last = rows + (<usize>n << 2);
  let a0 = splat<V>(0), a1 = a0, a2 = a0, a3 = a0;
  let b0 = a0, b1 = a0, b2 = a0, b3 = a0;
  if (accumulate) {
    a0 = loadLanes<V>(out0);
    a1 = loadLanes<V>(out0 + vector);
    a2 = loadLanes<V>(out0 + 2 * vector);
    a3 = loadLanes<V>(out0 + 3 * vector);
    b0 = loadLanes<V>(out1);
    b1 = loadLanes<V>(out1 + vector);
    b2 = loadLanes<V>(out1 + 2 * vector);
    b3 = loadLanes<V>(out1 + 3 * vector);
  }
  let p = load<usize>(rows) + x;
  let h = splatFrom<V>(taps);
  a0 = multiplyAdd<V>(a0, h, loadLanes<V>(p));
  a1 = multiplyAdd<V>(a1, h, loadLanes<V>(p + vector));
  a2 = multiplyAdd<V>(a2, h, loadLanes<V>(p + 2 * vector));
  a3 = multiplyAdd<V>(a3, h, loadLanes<V>(p + 3 * vector));
  for (rows += 4, taps += 4; rows < last; rows += 4, taps += 4) {
    p = load<usize>(rows) + x;
    const x0 = loadLanes<V>(p), x1 = loadLanes<V>(p + vector), x2 = loadLanes<V>(p + 2 * vector), x3 = loadLanes<V>(p + 3 * vector);
    h = splatFrom<V>(taps);
    a0 = multiplyAdd<V>(a0, h, x0);
    a1 = multiplyAdd<V>(a1, h, x1);
    a2 = multiplyAdd<V>(a2, h, x2);
    a3 = multiplyAdd<V>(a3, h, x3);
    h = splatFrom<V>(taps - 4);
    b0 = multiplyAdd<V>(b0, h, x0);
    b1 = multiplyAdd<V>(b1, h, x1);
    b2 = multiplyAdd<V>(b2, h, x2);
    b3 = multiplyAdd<V>(b3, h, x3);
  }
  p = load<usize>(last) + x;
  h = splatFrom<V>(taps - 4);
  storeLanes<V>(out0, a0);
  storeLanes<V>(out0 + vector, a1);
  storeLanes<V>(out0 + 2 * vector, a2);
  storeLanes<V>(out0 + 3 * vector, a3);
  storeLanes<V>(out1, multiplyAdd<V>(b0, h, loadLanes<V>(p)));
  storeLanes<V>(out1 + vector, multiplyAdd<V>(b1, h, loadLanes<V>(p + vector)));
  storeLanes<V>(out1 + 2 * vector, multiplyAdd<V>(b2, h, loadLanes<V>(p + 2 * vector)));
  storeLanes<V>(out1 + 3 * vector, multiplyAdd<V>(b3, h, loadLanes<V>(p + 3 * vector)));
}

function columnsVector<V>(out0: usize, out1: usize, rows: usize, x: usize, taps: usize, n: i32, accumulate: bool): void {
  let a = accumulate ? loadLanes<V>(out0) : splat<V>(0);
  let b = accumulate ? loadLanes<V>(out1) : splat<V>(0);
  const end = taps + (<usize>n << 2);
  for (; taps < end; taps += 4, rows += 4) {
    const h = splatFrom<V>(taps);
    a = multiplyAdd<V>(a, h, loadLanes<V>(load<usize>(rows) + x));
    b = multiplyAdd<V>(b, h, loadLanes<V>(load<usize>(rows, 4) + x));
  }
  storeLanes<V>(out0, a);
  storeLanes<V>(out1, b);
}
