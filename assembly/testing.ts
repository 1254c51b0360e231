/**
 * Second entry of the debug build, for tests: the inner routines one by one. `wide` true takes vectors of four floats, as SIMD builds do,
 * false single floats, as scalar builds do: both forms of one binary are held against each other. Release builds leave this file out.
 */
import { correlateColumns as correlateColumnsOf } from "./columns";
import { correlateRows as correlateRowsOf } from "./direct";
import { correlateRow as correlateRowOf } from "./rows";
import { enterPixels as enterPixelsOf, enterRow as enterRowOf } from "./enter";
import { forwardTransform as forwardTransformOf, inverseTransform as inverseTransformOf } from "./fft/transform";
import { deinterleave4 as deinterleave4Of, transpose as transposeOf } from "./lanes";
import { leaveRow as leaveRowOf } from "./leave";

export { decode, encode } from "./curve";

export function enterPixels(wide: bool, job: usize, out: usize, source: usize, pixels: i32): void {
  if (wide) enterPixelsOf<v128>(job, out, source, pixels);
  else enterPixelsOf<f32>(job, out, source, pixels);
}

export function enterRow(wide: bool, job: usize, out: usize, row: i32, source: usize): void {
  if (wide) enterRowOf<v128>(job, out, row, source);
  else enterRowOf<f32>(job, out, row, source);
}

export function leaveRow(wide: bool, job: usize, y: usize, row: i32, out: usize): void {
  if (wide) leaveRowOf<v128>(job, y, row, out);
  else leaveRowOf<f32>(job, y, row, out);
}

export function correlateRows(wide: bool, out0: usize, out1: usize, rows: usize, taps: usize, n: i32, m: i32, step: usize, count: i32): void {
  if (wide) correlateRowsOf<v128>(out0, out1, rows, taps, n, m, step, count);
  else correlateRowsOf<f32>(out0, out1, rows, taps, n, m, step, count);
}

export function correlateRow(wide: bool, out: usize, row: usize, taps: usize, m: i32, step: usize, count: i32): void {
  if (wide) correlateRowOf<v128>(out, row, taps, m, step, count);
  else correlateRowOf<f32>(out, row, taps, m, step, count);
}

export function correlateColumns(wide: bool, out0: usize, out1: usize, rows: usize, taps: usize, n: i32, count: i32, accumulate: bool): void {
  if (wide) correlateColumnsOf<v128>(out0, out1, rows, taps, n, count, accumulate);
  else correlateColumnsOf<f32>(out0, out1, rows, taps, n, count, accumulate);
}

export function forwardTransform(wide: bool, plan: usize, base: usize, stride: usize, apart: usize, vectors: i32): void {
  if (wide) forwardTransformOf<v128>(plan, base, stride, apart, vectors);
  else forwardTransformOf<f32>(plan, base, stride, apart, vectors);
}

export function inverseTransform(wide: bool, plan: usize, base: usize, stride: usize, apart: usize, vectors: i32): void {
  if (wide) inverseTransformOf<v128>(plan, base, stride, apart, vectors);
  else inverseTransformOf<f32>(plan, base, stride, apart, vectors);
}

export function transpose(wide: bool, out: usize, outStride: usize, source: usize, sourceStride: usize): void {
  if (wide) transposeOf<v128>(out, outStride, source, sourceStride);
  else transposeOf<f32>(out, outStride, source, sourceStride);
}

export function deinterleave4(wide: bool, plane0: usize, plane1: usize, plane2: usize, plane3: usize, source: usize): void {
  if (wide) deinterleave4Of<v128>(plane0, plane1, plane2, plane3, source);
  else deinterleave4Of<f32>(plane0, plane1, plane2, plane3, source);
}
