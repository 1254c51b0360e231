import { test } from "vitest";
import * as field from "../../src/generated/record.js";
import { transformError } from "../../src/math/rounding.js";
import { radicesOf } from "../../src/math/smoothNumbers.js";
import { firstDifference } from "./differences.js";
import { cores, type Core, type Job } from "./bench.js";
import { samplesOf } from "./enterJob.js";
import { commonFields, correlated, fieldOf, resultColumns, resultRows, stage, sweeping, type Sweeping } from "./sweepJob.js";
import { placePlan } from "./transformPlan.js";

/** A problem and how it is cut: tiles of `tileRows` × `tileColumns` points. */
interface Cut extends Sweeping {
  tileRows: number;
  tileColumns: number;
  taps: Float32Array;
}

const stripRowsOf = ({ tileRows, n }: Cut): number => tileRows - n + 1;
const tileStepOf = ({ tileColumns, m }: Cut): number => 4 * Math.floor((tileColumns - m + 1) / 4);

function stripJob({ bench }: Core, stated: Cut): Job {
  const { tileRows, tileColumns, channels, columns, sample } = stated;
  const odd = channels % 2 === 1;
  const pairs = odd ? channels : channels / 2;
  const planeStride = 4 * Math.max(tileColumns, columns.length + 3 - ((columns.length + 3) % 4)) + 16;
  const planeBytes = tileRows * planeStride;
  const job = commonFields(bench, stated)
    .integer(field.TAPS, bench.place(stated.taps))
    .integer(field.ENTERED, bench.take(4 * (columns.length * channels + 16)))
    .integer(field.COLUMN_PLAN, placePlan(bench, radicesOf(tileRows)!))
    .integer(field.ROW_PLAN, placePlan(bench, radicesOf(tileColumns)!))
    .integer(field.PLANES, bench.take(2 * pairs * planeBytes))
    .integer(field.PLANE_STRIDE, planeStride)
    .integer(field.PLANE_BYTES, planeBytes)
    .integer(field.PAIRS, pairs)
    .integer(field.TILE_ROWS, tileRows)
    .integer(field.TILE_COLUMNS, tileColumns)
    .integer(field.TILE_STEP, tileStepOf(stated))
    .integer(field.SPECTRUM, bench.take(tileRows * tileColumns * 8))
    .integer(field.ROW_SCRATCH, bench.take(tileColumns * 32))
    .integer(field.STRIP_ROWS, stripRowsOf(stated))
    .float(field.SCALE, 1 / (tileRows * tileColumns));
  if (sample !== "f32") return job;
  const markStride = 8 * Math.ceil((columns.length * channels) / 64);
  return job
    .integer(field.MARKS, bench.take(2 * tileRows * markStride))
    .integer(field.MARK_STRIDE, markStride)
    .integer(field.MARK_COUNTS, bench.take(2 * tileRows * 4))
    .integer(field.MARK_ROW, bench.take(markStride));
}

const upToFour = (count: number): number => 4 * Math.ceil(count / 4);

/** Two calls where there was one, cut at a multiple of `grain`: units must not depend on each other. */
function halved(units: number, grain: number, call: (from: number, to: number) => void): void {
  const middle = grain * Math.floor(units / 2 / grain);
  if (middle > 0) call(0, middle);
  call(middle, units);
}

function filtered(core: Core, job: Job, stated: Cut): Float32Array {
  const { bench, routines } = core;
  const { tileRows, tileColumns, channels } = stated;
  const groups = tileRows / routines.vectorFloats();
  const rowFloats = resultColumns(stated) * channels;
  const results = new Float32Array(resultRows(stated) * rowFloats);
  const [stripRows, rows] = [stripRowsOf(stated), resultRows(stated)];
  const { address } = job;
  routines.enterConstants(address, 0, 0, 0);
  routines.placeTaps(address, 0, 0, 0);
  halved(tileColumns, 4, (from, to) => routines.forwardColumns(address, from, to, 0));
  halved(groups, 1, (from, to) => routines.takeSpectrum(address, from, to, 0));
  const atOnce = channels % 2 === 0 ? 1 : 2;
  for (let strip = 0; strip * stripRows < rows; strip += atOnce) {
    for (let k = strip; k < strip + atOnce; k++) {
      halved(tileRows, 1, (from, to) => {
        const first = k * stripRows + from;
        stage(bench, job, stated, first, Math.max(0, Math.min(stated.rows.length - first, to - from)));
        routines.enterStrip(address, from, to, k);
      });
    }
    halved(upToFour(stated.columns.length), 4, (from, to) => routines.forwardColumns(address, from, to, 0));
    halved(groups, 1, (from, to) => routines.filterRows(address, from, to, 0));
    halved(upToFour(resultColumns(stated)), 4, (from, to) => routines.inverseColumns(address, from, to, 0));
    for (let k = strip; k < strip + atOnce && k * stripRows < rows; k++) {
      halved(Math.min(stripRows, rows - k * stripRows), 1, (from, to) => {
        routines.leaveStrip(address, from, to, k);
        results.set(bench.floats(fieldOf(bench, job, field.OUTPUT), (to - from) * rowFloats), (k * stripRows + from) * rowFloats);
      });
    }
  }
  return results;
}

/** Every build gives the same bytes, near the definition where it is a number and NaN where it is none. */
function check(stated: Cut): void {
  const { tileRows, tileColumns, taps } = stated;
  const label = `${stated.sample}, ${stated.channels} channels, ${resultColumns(stated)}×${resultRows(stated)} results, ${stated.m}×${stated.n} taps, tiles ${tileColumns}×${tileRows}`;
  const expected = correlated(stated, taps);
  const largest = Array.from(stated.samples, Math.abs).reduce((most, x) => (Number.isFinite(x) ? Math.max(most, x) : most), 14);
  const bound = transformError(tileRows * tileColumns) * taps.reduce((sum, tap) => sum + Math.abs(tap), 0) * largest;
  let first: Float32Array | undefined;
  for (const core of cores) {
    core.bench.clear();
    const found = filtered(core, stripJob(core, stated), stated);
    if (core.bench.damage() !== undefined) throw new Error(`${label}, ${core.name}: something is written outside the block at ${core.bench.damage()}`);
    first ??= found;
    const difference = firstDifference(found, first);
    if (difference !== undefined) throw new Error(`${label}, ${core.name}: ${difference}`);
  }
  expected.forEach((value, k) => {
    const wrong = Number.isFinite(value) ? !(Math.abs(first![k]! - value) <= bound) : !Number.isNaN(first![k]!);
    if (wrong) throw new Error(`${label}: result ${k} is ${first![k]}, not ${value}, allowed ${bound}`);
  });
}

function cut(sample: "u8" | "u16" | "f32", channels: number, results: [number, number], kernel: [number, number], tile: [number, number]): Cut {
  const [m, n] = kernel;
  const shape = sweeping({ sample, channels, columns: results[0], rows: results[1], m, n });
  const samples = samplesOf(sample, Math.max(1, ...shape.rows.map((row) => row + 1)) * shape.sourceColumns * channels, results[0] + 7 * channels);
  return { ...shape, samples, taps: Float32Array.from(samplesOf("f32", m * n, m + n)), tileColumns: tile[0], tileRows: tile[1] };
}

const cuts = ([1, 2, 3, 4] as const).flatMap((channels) => (["u8", "u16", "f32"] as const).map((sample) => ({ channels, sample })));

test.each(cuts)("$sample, $channels channels: strips and tiles of any cut give the correlation within 2 · log₂(N) · u", ({ channels, sample }) => {
  for (let columns = 1; columns <= 40; columns += columns < 9 ? 1 : 6) check(cut(sample, channels, [columns, (columns % 7) + 1], [3, 2], [12, 8]));
  for (const tile of [
    [16, 12],
    [20, 16],
    [24, 20],
    [60, 36],
    [100, 48],
  ] as const) {
    check(cut(sample, channels, [37, 23], [9, 5], [...tile]));
    check(cut(sample, channels, [5, 30], [1, 12], [...tile]));
    check(cut(sample, channels, [29, 3], [tile[0] - 3, 1], [...tile]));
  }
});

test.each([1, 2, 3, 4])("%i channels: NaN and ∞ become NaN in the results whose window holds them, and in no other", (channels) => {
  for (const at of [0, 100, 333, 431]) {
    const stated = cut("f32", channels, [26, 19], [4, 3], [16, 8]);
    const samples = Float32Array.from(stated.samples);
    samples[(at * channels) % samples.length] = NaN;
    samples[(at * channels + 211) % samples.length] = at % 2 ? Infinity : -Infinity;
    check({ ...stated, samples });
  }
});

test("samples near the largest float have finite sums over a tile", () => {
  const stated = cut("f32", 1, [26, 19], [4, 3], [32, 16]);
  check({ ...stated, samples: Float32Array.from(stated.samples, (x) => x * 3e37), taps: stated.taps.map((tap) => tap / 12) });
});
