import type { Kernel } from "../src/index.js";
import {
  COLUMN_PLAN,
  KERNEL_COLUMNS,
  KERNEL_ROWS,
  PAIRS,
  PLANES,
  PLANE_BYTES,
  PLANE_STRIDE,
  ROW_PLAN,
  ROW_SCRATCH,
  SCALE,
  SPECTRUM,
  TAPS,
  TILE_COLUMNS,
  TILE_ROWS,
} from "../src/generated/record.js";
import { code } from "../src/generated/simd.js";
import { radicesOf } from "../src/math/smoothNumbers.js";
import { rootsOfUnity } from "../src/math/rootsOfUnity.js";
import { coreOf } from "../test/routines/bench.js";
import { placePlan } from "../test/routines/transformPlan.js";
import type { Contender } from "./contender.js";
import type { Loop } from "./loops.js";
import { processorMilliseconds } from "./processorTime.js";

const pageBytes = 65536;

/** What a result may be off, over the root mean square of all results: single precision, a few roundings a pass. */
const tolerance = 2e-6;

/** Numbers within the unit square, the same as the yardstick's. */
const number = (place: number): number => ((Math.imul(place, 2654435761) >>> 8) & 0xffff) / 32768 - 1;

/**
 * The compiled core's own column transform, forward, in place: `batch` transforms of `points` points, real and imaginary parts in planes.
 * Each run starts from fresh numbers, which are not timed.
 */
export async function coreTransform(points: number, batch: number): Promise<Contender> {
  const { bench, routines } = await coreOf("simd", code);
  // An odd number of cache lines from row to row, as plans have it.
  const stride = 64 * (Math.ceil((batch * 4) / 64) | 1);
  const planeBytes = points * stride;
  bench.memory.grow(Math.ceil((2 * planeBytes) / pageBytes) + 8);
  const planes = bench.take(2 * planeBytes);
  const plan = placePlan(bench, radicesOf(points)!);
  const job = bench.job();
  job.integer(COLUMN_PLAN, plan).integer(PLANE_STRIDE, stride).integer(PLANE_BYTES, planeBytes).integer(PAIRS, 1).integer(PLANES, planes);
  const floats = bench.view(Float32Array, planes, planeBytes / 2);
  const fresh = Float32Array.from(floats, (_, place) => number(place));
  return {
    name: "forwardColumns",
    run() {
      floats.set(fresh);
      const begun = processorMilliseconds();
      routines.forwardColumns(job.address, 0, batch, 0);
      return processorMilliseconds() - begun;
    },
    verify() {
      floats.set(fresh);
      routines.forwardColumns(job.address, 0, batch, 0);
      return largestError(floats, fresh, points, batch, stride / 4);
    },
  };
}

/** One kernel transform by the compiled core's own routines: taps into the corner of a tile, its columns, its rows. */
export async function kernelTransform({ taps, width, height }: Kernel, columns: number, rows: number): Promise<Loop> {
  const { bench, routines } = await coreOf("simd", code);
  const stride = 64 * (Math.ceil((columns * 4) / 64) | 1);
  const planeBytes = rows * stride;
  const spectrumBytes = rows * columns * 8;
  bench.memory.grow(Math.ceil((2 * planeBytes + spectrumBytes) / pageBytes) + 16);
  const job = bench.job();
  job
    .integer(TAPS, bench.place(Float32Array.from(taps)))
    .integer(KERNEL_COLUMNS, width)
    .integer(KERNEL_ROWS, height)
    .integer(COLUMN_PLAN, placePlan(bench, radicesOf(rows)!))
    .integer(ROW_PLAN, placePlan(bench, radicesOf(columns)!))
    .integer(PLANES, bench.take(2 * planeBytes))
    .integer(PLANE_STRIDE, stride)
    .integer(PLANE_BYTES, planeBytes)
    .integer(PAIRS, 1)
    .integer(TILE_ROWS, rows)
    .integer(TILE_COLUMNS, columns)
    .integer(SPECTRUM, bench.take(spectrumBytes))
    .integer(ROW_SCRATCH, bench.take(columns * 32))
    .float(SCALE, 1 / (rows * columns));
  return {
    name: `transform of the kernel, ${columns}×${rows}`,
    run() {
      routines.placeTaps(job.address, 0, 0, 0);
      routines.forwardColumns(job.address, 0, 4 * Math.ceil(width / 4), 0);
      routines.takeSpectrum(job.address, 0, rows / 4, 0);
    },
  };
}

/** Largest difference from the definition, at some frequencies of some columns, over the root mean square of all results (Parseval). */
function largestError(found: Float32Array, given: Float32Array, points: number, batch: number, stride: number): number {
  const { cosine, sine } = rootsOfUnity(points);
  const apart = points * stride;
  let worst = 0;
  for (let c = 0; c < batch; c += Math.ceil(batch / 3)) {
    for (let k = 0; k < points; k += Math.ceil(points / 7)) {
      let re = 0;
      let im = 0;
      let squares = 0;
      for (let r = 0; r < points; r += 1) {
        const turn = (k * r) % points;
        const x = given[r * stride + c]!;
        const y = given[apart + r * stride + c]!;
        re += x * cosine[turn]! + y * sine[turn]!;
        im += y * cosine[turn]! - x * sine[turn]!;
        squares += x * x + y * y;
      }
      const place = placeOf(k, points) * stride + c;
      worst = Math.max(worst, Math.hypot(found[place]! - re, found[apart + place]! - im) / Math.sqrt(squares));
    }
  }
  if (!(worst <= tolerance)) throw new Error(`a transform of ${points} points is off by ${worst} of the root mean square; ${tolerance} is allowed`);
  return worst;
}

/** Where frequency k lies after the forward passes: see the core's fft/transform. */
function placeOf(frequency: number, points: number): number {
  let place = 0;
  let span = points;
  let left = frequency;
  for (const radix of radicesOf(points)!) {
    span /= radix;
    place += (left % radix) * span;
    left = Math.floor(left / radix);
  }
  return place;
}
