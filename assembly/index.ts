/**
 * Every export of the core: stateless routines over memory that the host owns. The module imports that memory and nothing else.
 *
 * Common to all: `job` is the address of a job record (record.ts); from … to − 1 are the units of work that one call does, so that the
 * host can bound how long a call takes. Steps that read samples find the rows that are new to them staged in order (STAGING), steps that
 * write samples leave rows from … to − 1 in order (OUTPUT). Working vectors are four floats in SIMD builds and one in scalar ones:
 * every sum is taken in the same order in both.
 *
 *     set-up    enterConstants · decodeCurve · placeTaps, forwardColumns, takeSpectrum (FFT)
 *     sweeps    sweepDirect · sweepSeparable · sweepDirectBytes · sweepSeparableBytes                      units: result rows
 *               sweepByteSums · sweepIntegerSums · sweepRunningSum
 *     FFT       enterStrip (rows) → forwardColumns (floats) → filterRows (groups of rows) → inverseColumns (floats) → leaveStrip (rows)
 */
import { sweepDirectBytes as sweepDirectBytesOf } from "./bytes/direct";
import { sweepSeparableBytes as sweepSeparableBytesOf } from "./bytes/separable";
import { sweepByteSums as sweepByteSumsOf } from "./bytes/sums";
import { decodeTable } from "./curve";
import { enterConstants as enterConstantsOf } from "./enter";
import { enterStrip as enterStripOf, leaveStrip as leaveStripOf } from "./fft/strips";
import {
  filterRows as filterRowsOf, forwardColumns as forwardColumnsOf, inverseColumns as inverseColumnsOf, placeTaps as placeTapsOf,
  takeSpectrum as takeSpectrumOf,
} from "./fft/tiles";
import { sweepIntegerSums as sweepIntegerSumsOf } from "./integerSums";
import { CURVE } from "./record";
import { sweepRunningSum as sweepRunningSumOf } from "./runningSum";
import { sweepDirect as sweepDirectOf, sweepSeparable as sweepSeparableOf } from "./sweep";

/** 1 where products may be added without being rounded before. */
export function fused(): i32 {
  return ASC_FEATURE_RELAXED_SIMD ? 1 : 0;
}

/** Floats in a working vector: 4 or 1. */
export function vectorFloats(): i32 {
  return ASC_FEATURE_SIMD ? 4 : 1;
}

export function sweepDirect(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) sweepDirectOf<v128>(job, from, to);
  else sweepDirectOf<f32>(job, from, to);
}

export function sweepSeparable(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) sweepSeparableOf<v128>(job, from, to);
  else sweepSeparableOf<f32>(job, from, to);
}

export function sweepDirectBytes(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) sweepDirectBytesOf<v128>(job, from, to);
  else sweepDirectBytesOf<i32>(job, from, to);
}

export function sweepSeparableBytes(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) sweepSeparableBytesOf<v128>(job, from, to);
  else sweepSeparableBytesOf<i32>(job, from, to);
}

export function sweepByteSums(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) sweepByteSumsOf<v128>(job, from, to);
  else sweepByteSumsOf<i32>(job, from, to);
}

export function sweepIntegerSums(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) sweepIntegerSumsOf<v128>(job, from, to);
  else sweepIntegerSumsOf<f32>(job, from, to);
}

export function sweepRunningSum(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) sweepRunningSumOf<v128>(job, from, to);
  else sweepRunningSumOf<f32>(job, from, to);
}

/** Set-up: what stands outside the image, from the two constant pixels. */
export function enterConstants(job: usize): void {
  if (ASC_FEATURE_SIMD) enterConstantsOf<v128>(job);
  else enterConstantsOf<f32>(job);
}

/** Set-up: the linear value of every code up to `to` − 1, at CURVE. */
export function decodeCurve(job: usize, from: i32, to: i32): void {
  decodeTable(load<usize>(job, CURVE), to - 1);
}

export function enterStrip(job: usize, from: i32, to: i32, strip: i32): void {
  if (ASC_FEATURE_SIMD) enterStripOf<v128>(job, from, to, strip);
  else enterStripOf<f32>(job, from, to, strip);
}

export function leaveStrip(job: usize, from: i32, to: i32, strip: i32): void {
  if (ASC_FEATURE_SIMD) leaveStripOf<v128>(job, from, to, strip);
  else leaveStripOf<f32>(job, from, to, strip);
}

export function forwardColumns(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) forwardColumnsOf<v128>(job, from, to);
  else forwardColumnsOf<f32>(job, from, to);
}

export function inverseColumns(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) inverseColumnsOf<v128>(job, from, to);
  else inverseColumnsOf<f32>(job, from, to);
}

export function filterRows(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) filterRowsOf<v128>(job, from, to);
  else filterRowsOf<f32>(job, from, to);
}

export function placeTaps(job: usize): void {
  if (ASC_FEATURE_SIMD) placeTapsOf<v128>(job);
  else placeTapsOf<f32>(job);
}

export function takeSpectrum(job: usize, from: i32, to: i32): void {
  if (ASC_FEATURE_SIMD) takeSpectrumOf<v128>(job, from, to);
  else takeSpectrumOf<f32>(job, from, to);
}
