import { laneBytes, lanes, loadLanes, multiply, splat, storeLanes, transpose } from "../lanes";
import { assertFloats, assertGroups, assertTiles } from "../promises";
import {
  COLUMN_PLAN, KERNEL_COLUMNS, KERNEL_ROWS, OUTPUT_COLUMNS, PAIRS, PLANES, PLANE_BYTES, PLANE_STRIDE, ROW_PLAN, ROW_SCRATCH,
  SCALE, SPECTRUM, TAPS, TILE_COLUMNS, TILE_STEP,
} from "../record";
import { filter4 } from "./butterflies";
import { forwardPasses, forwardTransform, inversePasses, inverseTransform } from "./transform";

/*
 * Two-dimensional transforms of strips. Columns are transformed once, `vectorsAtOnce` vectors at a time; rows tile by tile, overlapping
 * by kernel columns − 1: a group of rows is turned on its side into scratch that stays in the first cache, transformed, multiplied by
 * the kernel's spectrum, transformed back, and its valid columns go back where they came from: each tile writes only what no later tile reads.
 */

const VECTORS_AT_ONCE: i32 = 4;

/** Transforms vectors from … to − 1 of the columns of every pair, in blocks that share cache lines. */
// @ts-ignore: decorator
@inline
function columns<V>(job: usize, from: i32, to: i32, inverse: bool): void {
  const plan = load<usize>(job, COLUMN_PLAN);
  const stride = load<usize>(job, PLANE_STRIDE);
  const apart = load<usize>(job, PLANE_BYTES);
  for (let pair = 0; pair < load<i32>(job, PAIRS); pair++) {
    const base = load<usize>(job, PLANES) + <usize>(2 * pair) * apart;
    for (let v = from; v < to; v += VECTORS_AT_ONCE * 4 / lanes<V>()) {
      const count = min<i32>(to - v, VECTORS_AT_ONCE * 4 / lanes<V>());
      if (inverse) inverseTransform<V>(plan, base + <usize>v * laneBytes<V>(), stride, apart, count);
      else forwardTransform<V>(plan, base + <usize>v * laneBytes<V>(), stride, apart, count);
    }
  }
}

/** Column transforms of floats from … to − 1 of each plane row (multiples of four). */
export function forwardColumns<V>(job: usize, from: i32, to: i32): void {
  assertFloats(job, from, to);
  columns<V>(job, from / lanes<V>(), to / lanes<V>(), false);
}

export function inverseColumns<V>(job: usize, from: i32, to: i32): void {
  assertFloats(job, from, to);
  columns<V>(job, from / lanes<V>(), to / lanes<V>(), true);
}

/** Turns columns first … first + count − 1 of a group of rows into scratch; columns past the planes are zeros. */
function gatherTile<V>(scratch: usize, plane: usize, stride: usize, first: i32, count: i32, readable: i32): void {
  const vector = laneBytes<V>();
  const end = max<i32>(0, min<i32>(count, readable - first));
  plane += <usize>first << 2;
  let x = 0;
  for (; x < end; x += lanes<V>()) transpose<V>(scratch + <usize>x * vector, vector, plane + (<usize>x << 2), stride);
  if (x < count) memory.fill(scratch + <usize>x * vector, 0, <usize>(count - x) * vector);
}

/** The last pass forward, times the spectrum, and the first pass back, which are both of radix 4. */
function filterFours<V>(scratch: usize, apart: usize, spectrum: usize, count: i32): void {
  const fours: usize = 4 * laneBytes<V>();
  for (const end = scratch + <usize>count * laneBytes<V>(); scratch < end; scratch += fours, spectrum += 2 * fours) filter4<V>(scratch, apart, spectrum);
}

/**
 * Filters the rows of groups from … to − 1 (a group: V's lanes) of every pair, tile after tile, in place.
 *
 *     row[first + c] ← inverse(forward(row[first … first + N − 1]) · spectrum)[c],   0 ≤ c < step, first = 0, step, 2·step, …
 *
 * Requires  step ≤ TILE_COLUMNS − KERNEL_COLUMNS + 1, a multiple of four, so that a tile writes only what no later tile reads;
 *           the last pass of ROW_PLAN is of radix 4   (promised by planning/tiles)
 * Cost      two transforms of TILE_COLUMNS points and one product a tile; allocates nothing
 * Accuracy  as the transforms, and γ(3) of the product
 */
export function filterRows<V>(job: usize, from: i32, to: i32): void {
  assertGroups(job, from, to, lanes<V>());
  const plan = load<usize>(job, ROW_PLAN);
  const outer = load<i32>(plan) - 1;
  const stride = load<usize>(job, PLANE_STRIDE);
  const planeBytes = load<usize>(job, PLANE_BYTES);
  const count = load<i32>(job, TILE_COLUMNS);
  const step = load<i32>(job, TILE_STEP);
  const scratch = load<usize>(job, ROW_SCRATCH);
  const vector = laneBytes<V>();
  const apart = <usize>count * vector;
  const readable = <i32>(stride >> 2);
  const end = load<i32>(job, OUTPUT_COLUMNS);
  for (let pair = 0; pair < load<i32>(job, PAIRS); pair++) {
    for (let group = from; group < to; group++) {
      const re = load<usize>(job, PLANES) + <usize>(2 * pair) * planeBytes + <usize>(group * lanes<V>()) * stride;
      const spectrum = load<usize>(job, SPECTRUM) + <usize>group * 2 * apart;
      for (let first = 0; first < end; first += step) {
        gatherTile<V>(scratch, re, stride, first, count, readable);
        gatherTile<V>(scratch + apart, re + planeBytes, stride, first, count, readable);
        forwardPasses<V>(plan, outer, scratch, vector, apart, 1);
        filterFours<V>(scratch, apart, spectrum, count);
        inversePasses<V>(plan, outer, scratch, vector, apart, 1);
        for (let x = 0; x < min<i32>(step, end - first); x += lanes<V>()) {
          const target = re + (<usize>(first + x) << 2);
          transpose<V>(target, stride, scratch + <usize>x * vector, vector);
          transpose<V>(target + planeBytes, stride, scratch + apart + <usize>x * vector, vector);
        }
      }
    }
  }
}

/** Set-up, first step: the taps in the corner of an otherwise empty tile, in the first pair of planes. */
export function placeTaps<V>(job: usize): void {
  assertTiles(job);
  const m = load<i32>(job, KERNEL_COLUMNS);
  const stride = load<usize>(job, PLANE_STRIDE);
  const planes = load<usize>(job, PLANES);
  memory.fill(planes, 0, 2 * load<usize>(job, PLANE_BYTES));
  for (let j = 0; j < load<i32>(job, KERNEL_ROWS); j++) {
    memory.copy(planes + <usize>j * stride, load<usize>(job, TAPS) + (<usize>(j * m) << 2), <usize>m << 2);
  }
}

/** Set-up, after the columns: spectrum of groups from … to − 1, conjugated (correlation) and scaled for the unscaled inverse. */
export function takeSpectrum<V>(job: usize, from: i32, to: i32): void {
  assertGroups(job, from, to, lanes<V>());
  const stride = load<usize>(job, PLANE_STRIDE);
  const planes = load<usize>(job, PLANES);
  const count = load<i32>(job, TILE_COLUMNS);
  const scratch = load<usize>(job, ROW_SCRATCH);
  const vector = laneBytes<V>();
  const apart = <usize>count * vector;
  const scale = splat<V>(load<f32>(job, SCALE)), opposite = splat<V>(-load<f32>(job, SCALE));
  for (let group = from; group < to; group++) {
    const re = planes + <usize>(group * lanes<V>()) * stride;
    gatherTile<V>(scratch, re, stride, 0, count, count);
    gatherTile<V>(scratch + apart, re + load<usize>(job, PLANE_BYTES), stride, 0, count, count);
    forwardTransform<V>(load<usize>(job, ROW_PLAN), scratch, vector, apart, 1);
    let out = load<usize>(job, SPECTRUM) + <usize>group * 2 * apart;
    for (let x: usize = 0; x < apart; x += vector, out += 2 * vector) {
      storeLanes<V>(out, multiply<V>(scale, loadLanes<V>(scratch + x)));
      storeLanes<V>(out + vector, multiply<V>(opposite, loadLanes<V>(scratch + apart + x)));
    }
  }
}
