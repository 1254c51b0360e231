import * as field from "../../src/generated/record.js";
import type { SampleType, Samples } from "../../src/types.js";
import { noise } from "../support/noise.js";
import type { Bench, Job } from "./bench.js";

export const sampleTypes = [
  { sample: "u8", code: 0, full: 255, make: Uint8Array },
  { sample: "u16", code: 1, full: 65535, make: Uint16Array },
  { sample: "f32", code: 2, full: 1, make: Float32Array },
] as const;

export const factsOf = (sample: SampleType) => sampleTypes.find((facts) => facts.sample === sample)!;

/** A list of samples of a type, by index. */
export function samplesBy(sample: SampleType, count: number, valueOf: (index: number) => number): Exclude<Samples, Uint8ClampedArray> {
  const samples = new (factsOf(sample).make)(count);
  for (let index = 0; index < count; index++) samples[index] = valueOf(index);
  return samples;
}

/** Samples over the whole range of a type; floats in −1 … 1. */
export function samplesOf(sample: SampleType, count: number, seed: number): Exclude<Samples, Uint8ClampedArray> {
  const next = noise(seed);
  next();
  const { full } = factsOf(sample);
  return samplesBy(sample, count, () => (sample === "f32" ? 2 * next() - 1 : Math.floor(next() * (full + 1))));
}

/** How samples of one type enter, and how many columns of which kind make up an extended row. */
export interface Entering {
  sample: SampleType;
  channels: number;
  /** Source column of each extended column; −1 is outside. */
  columns: readonly number[];
  /** Source row of each extended row; −1 is outside. */
  rows: readonly number[];
  /** Columns of the source, all of them staged. */
  sourceColumns: number;
  premultiply?: boolean;
  decode?: boolean;
}

/** Longest stretch of neighbours, found by trying every start. */
function stretchOf(columns: readonly number[]): { first: number; count: number } {
  let best = { first: 0, count: 0 };
  for (let first = 0; first < columns.length; first++) {
    let end = first;
    while (end < columns.length && columns[first]! >= 0 && columns[end] === columns[first]! + end - first) end++;
    if (end - first > best.count) best = { first, count: end - first };
  }
  return best;
}

/** Extended columns outside the stretch: from the stretch where it holds their pixel, else staged, else constant. */
function haloOf(columns: readonly number[], first: number, count: number): Int32Array {
  const pairs: number[] = [];
  columns.forEach((source, column) => {
    if (column >= first && column < first + count) return;
    const inside = first + source - (columns[first] ?? 0);
    pairs.push(column, source < 0 ? -1 : inside >= first && inside < first + count ? inside : -2 - source);
  });
  return Int32Array.from(pairs);
}

/** Writes the fields of a job that enter reads. Constant pixels hold 1, 2, … (outside by row) and 11, 12, … (outside by column). */
export function enterFields(bench: Bench, job: Job, stated: Entering): Job {
  const { sample, channels, columns, rows, sourceColumns, premultiply = false, decode = false } = stated;
  const { code, full } = factsOf(sample);
  const { first, count } = stretchOf(columns);
  const pixels = samplesBy(sample, 2 * channels, (k) => (k < channels ? 1 + k : 11 + k - channels));
  const halo = haloOf(columns, first, count);
  return job
    .integer(field.SOURCE_KIND, code)
    .integer(field.CHANNELS, channels)
    .integer(field.COLOURS, channels % 2 === 0 && (premultiply || decode) ? channels - 1 : channels)
    .integer(field.PREMULTIPLY, premultiply ? 1 : 0)
    .integer(field.DECODE, decode ? 1 : 0)
    .integer(field.CURVE, decode && sample !== "f32" ? bench.take(4 * (full + 1)) : 0)
    .integer(field.ROW_MAP, bench.place(Int32Array.from(rows)))
    .integer(field.STAGING_STRIDE, (sourceColumns * channels) << code)
    .integer(field.RUN_SOURCE, Math.max(0, columns[first] ?? 0))
    .integer(field.RUN_COLUMN, first)
    .integer(field.RUN_COUNT, count)
    .integer(field.HALO, bench.place(halo))
    .integer(field.HALO_COUNT, halo.length / 2)
    .integer(field.CONSTANT_PIXELS, bench.place(pixels))
    .integer(field.CONSTANT_ROW, bench.take(4 * columns.length * channels))
    .integer(field.CONSTANT_COLUMN, bench.take(4 * channels))
    .integer(field.EXTENDED_COLUMNS, columns.length)
    .integer(field.EXTENDED_ROWS, rows.length)
    .float(field.SOURCE_FULL, full)
    .float(field.WORKING_FULL, decode ? 1 : full);
}

/** What an extended row of plain samples is: source samples by the maps, constants elsewhere. */
export function extendedRow(stated: Entering, row: number, source: ArrayLike<number>): Float64Array {
  const { channels, columns, rows, sourceColumns } = stated;
  return Float64Array.from({ length: columns.length * channels }, (_, k) => {
    const column = columns[Math.floor(k / channels)]!;
    const c = k % channels;
    if (rows[row]! < 0) return 1 + c;
    return column < 0 ? 11 + c : source[(rows[row]! * sourceColumns + column) * channels + c]!;
  });
}
