import { code } from "../../src/generated/debug.js";
import type { Routines } from "../../src/runtime/routines.js";
import { coreOf, type Bench } from "./bench.js";

/** Inner routines that the debug build alone exports; `wide` true works on vectors of four floats, false on single ones. */
export interface InnerRoutines extends Routines {
  enterPixels(wide: boolean, job: number, out: number, source: number, pixels: number): void;
  enterRow(wide: boolean, job: number, out: number, row: number, source: number): void;
  leaveRow(wide: boolean, job: number, y: number, row: number, out: number): void;
  correlateRows(wide: boolean, out0: number, out1: number, rows: number, taps: number, n: number, m: number, step: number, count: number): void;
  correlateRow(wide: boolean, out: number, row: number, taps: number, m: number, step: number, count: number): void;
  correlateColumns(wide: boolean, out0: number, out1: number, rows: number, taps: number, n: number, count: number, accumulate: boolean): void;
  forwardTransform(wide: boolean, plan: number, base: number, stride: number, apart: number, vectors: number): void;
  inverseTransform(wide: boolean, plan: number, base: number, stride: number, apart: number, vectors: number): void;
  transpose(wide: boolean, out: number, outStride: number, source: number, sourceStride: number): void;
  deinterleave4(wide: boolean, plane0: number, plane1: number, plane2: number, plane3: number, source: number): void;
  decode(encoded: number): number;
  encode(linear: number): number;
}

const core = await coreOf("debug", code);

export const bench: Bench = core.bench;
export const inner = core.routines as InnerRoutines;

/** Both forms of a routine. */
export const forms = [
  { form: "vectors of four", wide: true, lanes: 4 },
  { form: "single floats", wide: false, lanes: 1 },
] as const;
