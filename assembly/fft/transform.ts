import { laneBytes } from "../lanes";
import { assertTransform } from "../promises";
import { forward2, forward3, forward4, forward5, inverse2, inverse3, inverse4, inverse5 } from "./butterflies";

/*
 * A transform of N points down the columns of complex planes, a few vectors of columns at a time, in place.
 *
 * Plan    i32 passes, then for each pass, widest span first:  i32 radix, i32 span, pointer to turns
 * Turns   for j = 0 … span ÷ radix − 1: (cosine, −sine) of 2π·j·k ÷ span, k = 1 … radix − 1, rounded once from double
 */

/** One pass over `vectors` vectors of columns. j runs outside so that the turns of one j serve every block of the span. */
// @ts-ignore: decorator
@inline
function pass<V>(radix: i32, inverse: bool, base: usize, stride: usize, apart: usize, points: i32, span: i32, turns: usize, vectors: i32): void {
  const legs = span / radix;
  const leg = <usize>legs * stride;
  const width = <usize>vectors * laneBytes<V>();
  const end = base + <usize>points * stride;
  const spanBytes = <usize>span * stride;
  for (let j = 0; j < legs; j++, base += stride, turns += <usize>(radix - 1) << 3) {
    for (let block = base; block < end; block += spanBytes) {
      for (let p = block; p < block + width; p += laneBytes<V>()) {
        if (j) butterfly<V>(radix, inverse, p, leg, apart, turns, true);
        else butterfly<V>(radix, inverse, p, leg, apart, turns, false);
      }
    }
  }
}

// @ts-ignore: decorator
@inline
function butterfly<V>(radix: i32, inverse: bool, p: usize, leg: usize, apart: usize, turns: usize, turned: bool): void {
  if (inverse) {
    if (radix == 4) inverse4<V>(p, leg, apart, turns, turned);
    else if (radix == 2) inverse2<V>(p, leg, apart, turns, turned);
    else if (radix == 3) inverse3<V>(p, leg, apart, turns, turned);
    else inverse5<V>(p, leg, apart, turns, turned);
  } else if (radix == 4) forward4<V>(p, leg, apart, turns, turned);
  else if (radix == 2) forward2<V>(p, leg, apart, turns, turned);
  else if (radix == 3) forward3<V>(p, leg, apart, turns, turned);
  else forward5<V>(p, leg, apart, turns, turned);
}

function forwardPass<V>(radix: i32, base: usize, stride: usize, apart: usize, points: i32, span: i32, turns: usize, vectors: i32): void {
  if (radix == 4) pass<V>(4, false, base, stride, apart, points, span, turns, vectors);
  else if (radix == 2) pass<V>(2, false, base, stride, apart, points, span, turns, vectors);
  else if (radix == 3) pass<V>(3, false, base, stride, apart, points, span, turns, vectors);
  else pass<V>(5, false, base, stride, apart, points, span, turns, vectors);
}

function inversePass<V>(radix: i32, base: usize, stride: usize, apart: usize, points: i32, span: i32, turns: usize, vectors: i32): void {
  if (radix == 4) pass<V>(4, true, base, stride, apart, points, span, turns, vectors);
  else if (radix == 2) pass<V>(2, true, base, stride, apart, points, span, turns, vectors);
  else if (radix == 3) pass<V>(3, true, base, stride, apart, points, span, turns, vectors);
  else pass<V>(5, true, base, stride, apart, points, span, turns, vectors);
}

/** Bytes of samples that stay in the first cache beside turns. */
const CACHED_BYTES: usize = 32768;

/** How many passes, widest span first, go over all points: the others stay within a block that the first cache holds, and go block after block. */
// @ts-ignore: decorator
@inline
function widePasses<V>(plan: usize, vectors: i32): i32 {
  const passes = load<i32>(plan);
  const pointBytes = <usize>vectors * 2 * laneBytes<V>();
  let wide = 0;
  for (let at = plan + 4; wide < passes - 1 && <usize>load<i32>(at, 4) * pointBytes > CACHED_BYTES; at += 12) wide++;
  return wide;
}

/**
 * Forward transform: natural order in, digit-reversed order out, in place.
 *
 *     X[k] = Σ_r x[r] · e^(−2πi·kr/N),   0 ≤ r < N;   X[k] lies at place Σ_p d_p · N ÷ (R_0 · … · R_p),  k = d_0 + R_0·(d_1 + R_1·(d_2 + …))
 *
 * Shapes    N points of `vectors` vectors of neighbouring columns, real parts at `base`, imaginary parts `apart` bytes behind
 * Units     pointers, stride (one point to the next) and apart: bytes, whole vectors
 * Requires  the radices of the plan multiply to N, the span of its first pass; the two planes do not overlap
 * Cost      N · vectors points a pass; allocates nothing
 * Accuracy  ‖error‖₂ ≤ (Π (1 + 2·√R·γ(k_R)) − 1) · ‖X‖₂ over the passes,  k₂ = 4, k₃ = 8, k₄ = 5, k₅ = 9 roundings
 * Source    Higham, Accuracy and Stability of Numerical Algorithms, §24.1
 */
export function forwardTransform<V>(plan: usize, base: usize, stride: usize, apart: usize, vectors: i32): void {
  forwardPasses<V>(plan, load<i32>(plan), base, stride, apart, vectors);
}

/** The first `passes` passes of a forward transform: all, or all but the last. */
export function forwardPasses<V>(plan: usize, passes: i32, base: usize, stride: usize, apart: usize, vectors: i32): void {
  assertTransform(plan, base, stride, apart, vectors, laneBytes<V>());
  const points = load<i32>(plan, 8);
  const end = plan + 4 + 12 * <usize>passes;
  const narrow = plan + 4 + 12 * <usize>widePasses<V>(plan, vectors);
  for (plan += 4; plan < narrow; plan += 12) {
    forwardPass<V>(load<i32>(plan), base, stride, apart, points, load<i32>(plan, 4), load<usize>(plan, 8), vectors);
  }
  const block = load<i32>(narrow, 4);
  for (let first = 0; first < points; first += block, base += <usize>block * stride) {
    for (let at = narrow; at < end; at += 12) {
      forwardPass<V>(load<i32>(at), base, stride, apart, block, load<i32>(at, 4), load<usize>(at, 8), vectors);
    }
  }
}

/**
 * Inverse transform, unscaled: digit-reversed order in, natural order out. Everything else as forwardTransform.
 *
 *     x[r] = Σ_k X[k] · e^(+2πi·kr/N)
 */
export function inverseTransform<V>(plan: usize, base: usize, stride: usize, apart: usize, vectors: i32): void {
  inversePasses<V>(plan, load<i32>(plan), base, stride, apart, vectors);
}

/** The last `passes` passes of an inverse transform: all, or all but the first. */
export function inversePasses<V>(plan: usize, passes: i32, base: usize, stride: usize, apart: usize, vectors: i32): void {
  assertTransform(plan, base, stride, apart, vectors, laneBytes<V>());
  const points = load<i32>(plan, 8);
  const last = plan + 4 + 12 * <usize>(passes - 1);
  const narrow = plan + 4 + 12 * <usize>widePasses<V>(plan, vectors);
  const block = load<i32>(narrow, 4);
  for (let first = 0, part = base; first < points; first += block, part += <usize>block * stride) {
    for (let at = last; at >= narrow; at -= 12) {
      inversePass<V>(load<i32>(at), part, stride, apart, block, load<i32>(at, 4), load<usize>(at, 8), vectors);
    }
  }
  for (let at = narrow - 12; at > plan; at -= 12) {
    inversePass<V>(load<i32>(at), base, stride, apart, points, load<i32>(at, 4), load<usize>(at, 8), vectors);
  }
}
