import * as field from "../../src/generated/record.js";
import type { SampleType } from "../../src/types.js";
import type { Bench, Core, Job } from "./bench.js";
import { enterFields, extendedRow, factsOf, samplesBy, type Entering } from "./enterJob.js";

/** A problem for sweeps: valid results of an extended image, written as floats. */
export interface Sweeping extends Entering {
  samples: ArrayLike<number>;
  /** Columns and rows of the kernel. */
  m: number;
  n: number;
}

export const resultColumns = ({ columns, m }: Sweeping): number => columns.length - m + 1;
export const resultRows = ({ rows, n }: Sweeping): number => rows.length - n + 1;

/** An extended image of `columns` × `rows` results: constants at the left and above; at the right, where there is room, a column of the stretch and one that is not in it. */
export function sweeping(stated: { sample: SampleType; channels: number; columns: number; rows: number; m: number; n: number }): Omit<Sweeping, "samples"> {
  const { sample, channels, m, n } = stated;
  const extended = { columns: stated.columns + m - 1, rows: stated.rows + n - 1 };
  const columns = Array.from({ length: extended.columns }, (_, k) => k - 1);
  if (extended.columns > 4) columns.splice(-2, 2, extended.columns - 5, extended.columns - 2);
  const rows = Array.from({ length: extended.rows }, (_, k) => k - 1);
  return { sample, channels, columns, rows, sourceColumns: Math.max(1, Math.max(...columns) + 1), m, n };
}

/** Rows of the extended image as floats. */
export function extendedImage(stated: Sweeping): Float64Array[] {
  return stated.rows.map((_, row) => extendedRow(stated, row, stated.samples));
}

/** Fields that all sweeps and strips share; results are floats. */
export function commonFields(bench: Bench, stated: Sweeping): Job {
  const { channels, m, n, rows } = stated;
  const columns = resultColumns(stated);
  const floats = 4 * Math.ceil((columns * channels) / 4);
  const resultStride = 4 * floats + 16;
  return enterFields(bench, bench.job(), stated)
    .integer(field.STAGING, bench.take(rows.length * stagedBytes(stated) + 16))
    .integer(field.KERNEL_COLUMNS, m)
    .integer(field.KERNEL_ROWS, n)
    .integer(field.RESULT, bench.take(2 * resultStride))
    .integer(field.RESULT_STRIDE, resultStride)
    .integer(field.RESULT_FLOATS, floats)
    .integer(field.OUTPUT_KIND, 2)
    .integer(field.OUTPUT_COLUMNS, columns)
    .integer(field.OUTPUT_ROWS, resultRows(stated))
    .integer(field.OUTPUT, bench.take(4 * columns * channels * resultRows(stated)))
    .integer(field.OUTPUT_STRIDE, 4 * columns * channels)
    .float(field.GAIN, 1)
    .float(field.OUTPUT_FULL, 1);
}

export const stagedBytes = ({ sample, sourceColumns, channels }: Entering): number => (sourceColumns * channels) << factsOf(sample).code;

/** Stages extended rows first … first + count − 1, as the host does. */
export function stage(bench: Bench, job: Job, stated: Sweeping, first: number, count: number): void {
  const { code, make } = factsOf(stated.sample);
  const staging = fieldOf(bench, job, field.STAGING);
  const rowSamples = stated.sourceColumns * stated.channels;
  for (let k = 0; k < count; k++) {
    const source = stated.rows[first + k] ?? -1;
    if (source < 0) continue;
    const row = samplesBy(stated.sample, rowSamples, (x) => stated.samples[source * rowSamples + x]!);
    new make(bench.memory.buffer, staging + ((k * rowSamples) << code), rowSamples).set(row);
  }
}

export function fieldOf(bench: Bench, job: Job, offset: number): number {
  return bench.view(Int32Array, job.address + offset, 1)[0]!;
}

/** Blocks of a ring and its pointer table, twice over. */
export function ring(bench: Bench, rows: number, byteLength: number, slackFloats = 4): number[] {
  const blocks = Array.from({ length: rows }, () => bench.place(new Float32Array(byteLength / 4).fill(NaN), { slackBytes: 4 * slackFloats }));
  return [...blocks, ...blocks];
}

type SweepName = "sweepDirect" | "sweepSeparable" | "sweepRunningSum" | "sweepIntegerSums";

/** Calls a sweep in slices of `slice` rows, each with the rows that are new to it staged, from the first that only enters; all results. */
export function swept({ bench, routines }: Core, name: SweepName, job: Job, stated: Sweeping, slice: number): Float32Array {
  const rows = resultRows(stated);
  const rowFloats = resultColumns(stated) * stated.channels;
  const results = new Float32Array(rows * rowFloats);
  routines.enterConstants(job.address, 0, 0, 0);
  for (let from = 1 - stated.n; from < rows; from += slice) {
    const to = Math.min(rows, from + slice);
    const top = Math.max(from, 0);
    stage(bench, job, stated, from + stated.n - 1, to - from);
    routines[name](job.address, from, to, 0);
    if (to > top) results.set(bench.floats(fieldOf(bench, job, field.OUTPUT), (to - top) * rowFloats), top * rowFloats);
  }
  return results;
}

/** Σ_j Σ_i taps[j · m + i] · extended[r + j][c + i], in double. */
export function correlated(stated: Sweeping, taps: ArrayLike<number>): Float64Array {
  const { m, n, channels } = stated;
  const image = extendedImage(stated);
  const rowFloats = resultColumns(stated) * channels;
  return Float64Array.from({ length: resultRows(stated) * rowFloats }, (_, k) => {
    const r = Math.floor(k / rowFloats);
    const x = k % rowFloats;
    let sum = 0;
    for (let j = 0; j < n; j++) for (let i = 0; i < m; i++) sum += taps[j * m + i]! * image[r + j]![x + i * channels]!;
    return sum;
  });
}
