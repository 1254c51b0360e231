import { describe, expect, test } from "vitest";
import * as field from "../../src/generated/record.js";
import { gamma } from "../../src/math/rounding.js";
import { firstDifference, largestDifference } from "./differences.js";
import { cores, type Core, type Job } from "./bench.js";
import { samplesOf } from "./enterJob.js";
import { commonFields, correlated, ring, resultColumns, resultRows, stagedBytes, sweeping, swept, type Sweeping } from "./sweepJob.js";

const channelCounts = [1, 2, 3, 4];
const widths = [1, 2, 3, 4, 5, 7, 8, 9, 15, 16, 17, 31, 33, 40];
const kernels = [
  [1, 1],
  [3, 1],
  [1, 4],
  [2, 2],
  [5, 3],
  [6, 7],
].map(([m, n]) => ({ m: m!, n: n! }));

/** Whole numbers: sums of products are exact in single precision. */
const wholeTaps = (count: number, seed: number): Float32Array => Float32Array.from(samplesOf("u8", count, seed), (x) => (x % 19) - 9);
const realTaps = (count: number, seed: number): Float32Array => Float32Array.from(samplesOf("f32", count, seed));
const absoluteSum = (taps: ArrayLike<number>): number => Array.from(taps).reduce((sum, tap) => sum + Math.abs(tap), 0);

function problem(sample: "u8" | "u16" | "f32", channels: number, columns: number, rows: number, kernel: { m: number; n: number }): Sweeping {
  const shape = sweeping({ sample, channels, columns, rows, ...kernel });
  const sourceRows = Math.max(...shape.rows) + 1;
  return { ...shape, samples: samplesOf(sample, Math.max(1, sourceRows) * shape.sourceColumns * channels, columns + 3 * rows + channels) };
}

/** The largest absolute value that a sum can meet: samples, or the constants of the corners. */
const largest = (stated: Sweeping): number => Math.max(14, ...Array.from(stated.samples, Math.abs));

/** Every build, in one call and in slices: the same bytes, near the definition, nothing written past a block. */
function check(name: Parameters<typeof swept>[1], stated: Sweeping, write: (core: Core) => Job, expected: Float64Array, bound: number): void {
  const label = `${name} ${stated.sample}, ${stated.channels} channels, ${resultColumns(stated)}×${resultRows(stated)} results, ${stated.m}×${stated.n} taps`;
  let first: Float32Array | undefined;
  for (const core of cores) {
    for (const slice of [1000, 2]) {
      core.bench.clear();
      const found = swept(core, name, write(core), stated, slice);
      if (core.bench.damage() !== undefined) throw new Error(`${label}, ${core.name}: something is written outside the block at ${core.bench.damage()}`);
      first ??= found;
      const difference = firstDifference(found, first);
      if (difference !== undefined) throw new Error(`${label}, ${core.name}, slices of ${slice}: ${difference}`);
    }
  }
  const worst = largestDifference(first!, expected);
  if (!(worst <= bound)) throw new Error(`${label}: off by ${worst}, allowed ${bound}`);
}

function extendedBytes({ columns, channels }: Sweeping): number {
  return 4 * Math.ceil((columns.length * channels) / 4 + 4) * 4;
}

function directJob({ bench }: Core, stated: Sweeping, taps: Float32Array): Job {
  return commonFields(bench, stated)
    .integer(field.TAPS, bench.place(taps))
    .integer(field.RING_ROWS, stated.n + 1)
    .integer(field.ROW_TABLE, bench.place(Int32Array.from(ring(bench, stated.n + 1, extendedBytes(stated)))));
}

function separableJob({ bench }: Core, stated: Sweeping, rowTaps: Float32Array, columnTaps: Float32Array): Job {
  const terms = columnTaps.length / stated.n;
  const stride = 16 * Math.ceil(extendedBytes(stated) / 16) + 16;
  const entered = bench.take(2 * stride + 8);
  bench.view(Int32Array, entered + 2 * stride, 2).set([entered, entered + stride]);
  const floats = 4 * Math.ceil((resultColumns(stated) * stated.channels) / 4);
  const tables = Array.from({ length: terms }, () => ring(bench, stated.n + 2, 4 * floats)).flat();
  return commonFields(bench, stated)
    .integer(field.TAPS, bench.place(rowTaps))
    .integer(field.COLUMN_TAPS, bench.place(columnTaps))
    .integer(field.TERMS, terms)
    .integer(field.ENTERED, entered)
    .integer(field.ENTERED_STRIDE, stride)
    .integer(field.RING_ROWS, stated.n + 2)
    .integer(field.ROW_TABLE, bench.place(Int32Array.from(tables)));
}

function floatSumsJob({ bench }: Core, stated: Sweeping, tap: number, phases: { column: number; row: number }): Job {
  const stride = 16 * Math.ceil(extendedBytes(stated) / 16) + 16;
  const floats = 4 * Math.ceil((resultColumns(stated) * stated.channels) / 4);
  return commonFields(bench, stated)
    .integer(field.TAPS, bench.place(Float32Array.of(64 * tap)))
    .integer(field.RING_ROWS, stated.n)
    .integer(field.ROW_TABLE, bench.place(Int32Array.from(ring(bench, stated.n, 4 * floats))))
    .integer(field.ENTERED, bench.take(2 * stride))
    .integer(field.ENTERED_STRIDE, stride)
    .integer(field.SUMS, bench.take(4 * floats))
    .float(field.SCALE, 1 / 64)
    .integer(field.COLUMN_PHASE, phases.column)
    .integer(field.ROW_PHASE, phases.row);
}

function integerSumsJob({ bench }: Core, stated: Sweeping, tap: number): Job {
  const { channels, sample, sourceColumns } = stated;
  const code = sample === "u8" ? 0 : 1;
  const rawSamples = 16 * Math.ceil(((sourceColumns + 1) * channels) / 16);
  const constants = Array.from({ length: rawSamples }, (_, k) => (k < (sourceColumns + 1) * channels ? 1 + (k % channels) : 0));
  return commonFields(bench, stated)
    .integer(field.TAPS, bench.place(Float32Array.of(tap)))
    .integer(field.RING_ROWS, stated.n + 1)
    .integer(field.ROW_TABLE, bench.place(Int32Array.from(ring(bench, stated.n + 1, rawSamples << code))))
    .integer(field.ENTERED, bench.take(extendedBytes(stated)))
    .integer(field.SUMS, bench.take(4 * rawSamples))
    .integer(field.RAW_SAMPLES, rawSamples)
    .integer(field.RAW_CONSTANT, bench.place(code === 0 ? Uint8Array.from(constants) : Uint16Array.from(constants)));
}

const cases = channelCounts.flatMap((channels) => kernels.map((kernel) => ({ channels, ...kernel })));

test("the shapes of the cases leave staged rows of more than no bytes", () => {
  expect(stagedBytes(problem("u16", 3, 1, 1, { m: 1, n: 1 }))).toBe(6);
});

describe.each(cases)("$channels channels, $m × $n taps", ({ channels, m, n }) => {
  const kernel = { m, n };
  test("sweepDirect correlates with all taps: integers exactly, floats within γ(m·n)", () => {
    for (const columns of widths) {
      for (const [sample, taps] of [
        ["u8", wholeTaps(m * n, columns)],
        ["u16", realTaps(m * n, columns)],
        ["f32", realTaps(m * n, columns)],
      ] as const) {
        const stated = problem(sample, channels, columns, (columns % 5) + 1, kernel);
        const bound = sample === "u8" ? 0 : gamma(m * n) * absoluteSum(taps) * largest(stated);
        check("sweepDirect", stated, (core) => directJob(core, stated, taps), correlated(stated, taps), bound);
      }
    }
  });

  test("sweepSeparable correlates with the sum of outer products of its terms: integers exactly, floats within γ(m + terms·n)", () => {
    for (const columns of widths) {
      for (const terms of [1, 3]) {
        for (const sample of ["u8", "f32"] as const) {
          const make = sample === "u8" ? wholeTaps : realTaps;
          const [rowTaps, columnTaps] = [make(terms * m, columns), make(terms * n, columns + 50)];
          const products = Array.from({ length: terms }, (_, t) =>
            Array.from({ length: m * n }, (_, k) => columnTaps[t * n + Math.floor(k / m)]! * rowTaps[t * m + (k % m)]!),
          );
          const taps = Float64Array.from({ length: m * n }, (_, k) => products.reduce((sum, term) => sum + term[k]!, 0));
          const stated = problem(sample, channels, columns, (columns % 4) + 1, kernel);
          const weight = products.reduce((sum, term) => sum + absoluteSum(term), 0);
          const bound = sample === "u8" ? 0 : gamma(m + terms * n) * weight * largest(stated);
          check("sweepSeparable", stated, (core) => separableJob(core, stated, rowTaps, columnTaps), correlated(stated, taps), bound);
        }
      }
    }
  });

  test("sweepRunningSum is tap · the sum of the window, from any phase of the blocks, within γ(m + n + 1)", () => {
    for (const columns of widths) {
      const tap = Math.fround(1 / (m * n));
      const stated = problem("f32", channels, columns, (columns % 6) + 1, kernel);
      const expected = correlated(stated, new Float64Array(m * n).fill(tap));
      for (const phases of [
        { column: 0, row: 0 },
        { column: m - 1, row: n - 1 },
        { column: columns % m, row: (columns + 1) % n },
      ]) {
        const bound = gamma(m + n + 1) * tap * m * n * largest(stated);
        check("sweepRunningSum", stated, (core) => floatSumsJob(core, stated, tap, phases), expected, bound);
      }
    }
  });

  test("sweepIntegerSums is tap · the exact sum of the window", () => {
    for (const columns of widths) {
      for (const sample of ["u8", "u16"] as const) {
        const stated = problem(sample, channels, columns, (columns % 6) + 1, kernel);
        // Sums below 2²⁴ are floats, and a tap that is a power of two keeps them exact.
        check("sweepIntegerSums", stated, (core) => integerSumsJob(core, stated, 0.25), correlated(stated, new Float64Array(m * n).fill(0.25)), 0);
      }
    }
  });
});

test("integer sums pass 2³¹ and stop short of 2³²: wrapped arithmetic, right results to the last float", () => {
  const [m, n] = [257, 255];
  const shape = sweeping({ sample: "u16", channels: 1, columns: 9, rows: 3, m, n });
  const stated: Sweeping = { ...shape, samples: new Uint16Array((Math.max(...shape.rows) + 1) * shape.sourceColumns).fill(65535) };
  expect(m * n * 65535).toBeGreaterThan(2 ** 31);
  expect(m * n * 65535).toBeLessThan(2 ** 32);
  // One rounding to float each.
  const expected = correlated(stated, new Float64Array(m * n).fill(1)).map(Math.fround);
  check("sweepIntegerSums", stated, (core) => integerSumsJob(core, stated, 1), expected, 0);
});

test("a NaN reaches the results whose window holds it, and no other", () => {
  const [m, n] = [3, 4];
  const shape = sweeping({ sample: "f32", channels: 1, columns: 21, rows: 11, m, n });
  for (const at of [0, 30, 77, 140, shape.sourceColumns * 13 - 1]) {
    const samples = new Float32Array(shape.sourceColumns * 13).fill(1);
    samples[at] = NaN;
    const stated: Sweeping = { ...shape, samples };
    const touched = Array.from(correlated(stated, new Float64Array(m * n).fill(1)), Number.isNaN);
    for (const core of cores) {
      core.bench.clear();
      const found = swept(core, "sweepRunningSum", floatSumsJob(core, stated, 1, { column: 1, row: 2 }), stated, 4);
      expect(Array.from(found, Number.isNaN)).toEqual(touched);
    }
  }
});
