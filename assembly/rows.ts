import { laneBytes, loadLanes, multiply, multiplyAdd, splat, splatFrom, storeLanes } from "./lanes";
import { assertRowPass } from "./promises";

/**
 * Correlates one row of floats with one vector of taps.
 *
 *     out[x] = Σ_i taps[i] · row[x + i·step],   0 ≤ i < m
 *
 * Shapes    row: count + (m − 1)·step floats; taps m; out: count floats
 * Units     pointers: bytes; count: floats, a multiple of four; step: bytes from one tap to the next in the row
 * Requires  row readable for whole vectors; out apart from the row
 * Cost      count · m multiply–adds; allocates nothing
 * Accuracy  |error| ≤ γ(m) · Σ|taps| · max|row|
 * Source    Higham, Accuracy and Stability of Numerical Algorithms, §3.1 (bound)
 */
export function correlateRow<V>(out: usize, row: usize, taps: usize, m: i32, step: usize, count: i32): void {
  assertRowPass(out, row, taps, m, step, count);
  const bytes = <usize>count << 2;
  const block: usize = 6 * laneBytes<V>();
  let x: usize = 0;
  const half: usize = 4 * laneBytes<V>();
  const lag = half / step;
  if (lag * step == half && lag << 1 <= <usize>m) for (; x + 2 * half <= bytes; x += 2 * half) twoBlocks<V>(out + x, row + x, taps, m, lag, step);
  for (; x + block <= bytes; x += block) rowBlock<V>(out + x, row + x, taps, m, step);
  if (x == bytes) return;
  if (bytes >= block) {
    x = bytes - block;
    rowBlock<V>(out + x, row + x, taps, m, step);
  } else {
    for (; x < bytes; x += laneBytes<V>()) rowVector<V>(out + x, row + x, taps, m, step);
  }
}

/**
 * Two blocks of four vectors side by side, the second one `lag` taps behind the first: where both are at work a vector of samples is
 * loaded once for two sums. Eight sums, four samples and two taps: fourteen registers.
 */
function twoBlocks<V>(out: usize, p: usize, taps: usize, m: i32, lag: usize, step: usize): void {
  const vector = laneBytes<V>();
  const behind = lag << 2;
  let a0 = splat<V>(0), a1 = a0, a2 = a0, a3 = a0;
  let b0 = a0, b1 = a0, b2 = a0, b3 = a0;
  let end = taps + behind;
  for (; taps < end; taps += 4, p += step) {
    const h = splatFrom<V>(taps);
    a0 = multiplyAdd<V>(a0, h, loadLanes<V>(p));
    a1 = multiplyAdd<V>(a1, h, loadLanes<V>(p + vector));
    a2 = multiplyAdd<V>(a2, h, loadLanes<V>(p + 2 * vector));
    a3 = multiplyAdd<V>(a3, h, loadLanes<V>(p + 3 * vector));
  }
  end += (<usize>m << 2) - behind;
  for (; taps < end; taps += 4, p += step) {
    const x0 = loadLanes<V>(p), x1 = loadLanes<V>(p + vector), x2 = loadLanes<V>(p + 2 * vector), x3 = loadLanes<V>(p + 3 * vector);
    const h = splatFrom<V>(taps);
    a0 = multiplyAdd<V>(a0, h, x0);
    a1 = multiplyAdd<V>(a1, h, x1);
    a2 = multiplyAdd<V>(a2, h, x2);
    a3 = multiplyAdd<V>(a3, h, x3);
    const g = splatFrom<V>(taps - behind);
    b0 = multiplyAdd<V>(b0, g, x0);
    b1 = multiplyAdd<V>(b1, g, x1);
    b2 = multiplyAdd<V>(b2, g, x2);
    b3 = multiplyAdd<V>(b3, g, x3);
  }
  for (taps -= behind; taps < end; taps += 4, p += step) {
    const g = splatFrom<V>(taps);
    b0 = multiplyAdd<V>(b0, g, loadLanes<V>(p));
    b1 = multiplyAdd<V>(b1, g, loadLanes<V>(p + vector));
    b2 = multiplyAdd<V>(b2, g, loadLanes<V>(p + 2 * vector));
    b3 = multiplyAdd<V>(b3, g, loadLanes<V>(p + 3 * vector));
  }
  storeLanes<V>(out, a0);
  storeLanes<V>(out + vector, a1);
  storeLanes<V>(out + 2 * vector, a2);
  storeLanes<V>(out + 3 * vector, a3);
  out += 4 * vector;
  storeLanes<V>(out, b0);
  storeLanes<V>(out + vector, b1);
  storeLanes<V>(out + 2 * vector, b2);
  storeLanes<V>(out + 3 * vector, b3);
}

/** Six vectors of sums, six of samples and a tap: thirteen registers, and enough independent sums to hide the latency of an addition. */
function rowBlock<V>(out: usize, p: usize, taps: usize, m: i32, step: usize): void {
  const vector = laneBytes<V>();
  let a0 = splat<V>(0), a1 = a0, a2 = a0, a3 = a0, a4 = a0, a5 = a0;
  for (const end = taps + (<usize>m << 2); taps < end; taps += 4, p += step) {
    const h = splatFrom<V>(taps);
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
function rowVector<V>(out: usize, p: usize, taps: usize, m: i32, step: usize): void {
  let a = splat<V>(0);
  for (const end = taps + (<usize>m << 2); taps < end; taps += 4, p += step) a = multiplyAdd<V>(a, splatFrom<V>(taps), loadLanes<V>(p));
  storeLanes<V>(out, a);
}

/** row ← scale · row, whole vectors. */
export function scaleRow<V>(row: usize, floats: i32, scale: f32): void {
  const factor = splat<V>(scale);
  const end = row + (<usize>floats << 2);
  for (; row < end; row += laneBytes<V>()) storeLanes<V>(row, multiply<V>(factor, loadLanes<V>(row)));
}
