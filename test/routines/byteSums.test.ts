import { describe, expect, test } from "vitest";
import * as field from "../../src/generated/record.js";
import { cores, type Core, type Job } from "./bench.js";
import { samplesOf } from "./enterJob.js";
import { commonFields, correlated, fieldOf, resultColumns, resultRows, ring, stage, sweeping, type Sweeping } from "./sweepJob.js";

const widths = [1, 2, 3, 4, 5, 7, 8, 9, 15, 16, 17, 31, 33, 40];
const kernels = [
  [1, 1],
  [3, 1],
  [1, 4],
  [2, 2],
  [5, 3],
  [6, 7],
].map(([m, n]) => ({ m: m!, n: n! }));

interface Scaling {
  bias: number;
  scale: number;
  divisor: number;
}

function byteSumsJob({ bench }: Core, stated: Sweeping, { bias, scale, divisor }: Scaling): Job {
  const { channels, columns, sourceColumns, n } = stated;
  const sumBytes = divisor ? 4 : 2;
  const staged = sourceColumns * channels;
  const constants = Uint8Array.from({ length: staged }, (_, k) => 1 + (k % channels));
  const entered = bench.take(64 + columns.length * channels * sumBytes + 128) + 64;
  const rows = resultRows(stated);
  const count = resultColumns(stated) * channels;
  return commonFields(bench, stated)
    .integer(field.OUTPUT_KIND, 0)
    .integer(field.OUTPUT, bench.take(count * rows))
    .integer(field.OUTPUT_STRIDE, count)
    .integer(field.RING_ROWS, n)
    .integer(field.ROW_TABLE, bench.place(Int32Array.from(ring(bench, n, 16 * Math.ceil(staged / 16)))))
    .integer(field.ENTERED, entered)
    .integer(field.SUMS, bench.take(staged * sumBytes))
    .integer(field.RAW_CONSTANT, bench.place(constants))
    .integer(field.SUM_BIAS, bias)
    .float(field.SCALE, scale)
    .integer(field.DIVISOR, divisor);
}

/** Results of calls of `slice` extended rows, staged, or read where the source lies. */
function swept({ bench, routines }: Core, job: Job, stated: Sweeping, slice: number, inPlace: boolean): Uint8Array {
  const rows = resultRows(stated);
  const count = resultColumns(stated) * stated.channels;
  const results = new Uint8Array(rows * count);
  const rowBytes = stated.sourceColumns * stated.channels;
  if (inPlace) job.integer(field.SOURCE_ROWS, bench.place(Uint8Array.from(stated.samples))).integer(field.SOURCE_ROW_STRIDE, rowBytes);
  for (let from = 1 - stated.n; from < rows; from += slice) {
    const to = Math.min(rows, from + slice);
    if (!inPlace) stage(bench, job, stated, from + stated.n - 1, to - from);
    routines.sweepByteSums(job.address, from, to, 0);
    const top = Math.max(from, 0);
    if (to > top) results.set(bench.view(Uint8Array, fieldOf(bench, job, field.OUTPUT), (to - top) * count), top * count);
  }
  return results;
}

function problem(channels: number, columns: number, rows: number, kernel: { m: number; n: number }): Sweeping {
  const shape = sweeping({ sample: "u8", channels, columns, rows, ...kernel });
  return { ...shape, samples: samplesOf("u8", (Math.max(...shape.rows, 0) + 1) * shape.sourceColumns * channels, columns + 3 * rows + channels) };
}

function check(stated: Sweeping, scaling: Scaling, expected: ArrayLike<number>): void {
  for (const core of cores) {
    for (const slice of [1000, 2, 3]) {
      for (const inPlace of [false, true]) {
        core.bench.clear();
        const found = swept(core, byteSumsJob(core, stated, scaling), stated, slice, inPlace);
        const label = `${core.name}, ${stated.channels} channels, ${resultColumns(stated)} columns, slices of ${slice}, ${inPlace ? "in place" : "staged"}`;
        if (core.bench.damage() !== undefined) throw new Error(`${label}: something is written outside the block at ${core.bench.damage()}`);
        const wrong = found.findIndex((value, k) => value !== expected[k]);
        if (wrong >= 0) throw new Error(`${label}: result ${wrong} is ${found[wrong]}, not ${expected[wrong]}`);
      }
    }
  }
}

const cases = [1, 2, 3, 4].flatMap((channels) => kernels.map((kernel) => ({ channels, ...kernel })));

describe.each(cases)("sweepByteSums, $channels channels, $m × $n taps", ({ channels, m, n }) => {
  test("with a divisor results are the mean, rounded half up", () => {
    for (const columns of widths) {
      const stated = problem(channels, columns, (columns % 6) + 1, { m, n });
      const sums = correlated(stated, new Float64Array(m * n).fill(1));
      const count = m * n;
      const scaling = { bias: Math.floor(count / 2), scale: Math.fround(1 / count), divisor: count };
      check(
        stated,
        scaling,
        sums.map((sum) => Math.floor((2 * sum + count) / (2 * count))),
      );
    }
  });

  test("without one they are the integers nearest to scale · (bias + sum)", () => {
    for (const columns of widths) {
      const stated = problem(channels, columns, (columns % 5) + 1, { m, n });
      const sums = correlated(stated, new Float64Array(m * n).fill(1));
      // A scale with few bits: products are exact, and 0.3 away from ties at least.
      const scaling = { bias: 3, scale: 1 / 64, divisor: 0 };
      const even = (value: number): number => (value % 1 === 0.5 ? 2 * Math.round(value / 2) : Math.round(value));
      check(
        stated,
        scaling,
        sums.map((sum) => even((sum + 3) / 64) % 256),
      );
    }
  });
});

test("sums of 140 rows of 255 pass what 16 bits hold: they are wide where there is a divisor", () => {
  const stated = { ...sweeping({ sample: "u8", channels: 4, columns: 9, rows: 3, m: 5, n: 140 }) };
  const samples = new Uint8Array((Math.max(...stated.rows) + 1) * stated.sourceColumns * 4).fill(255);
  const whole: Sweeping = { ...stated, samples };
  const sums = correlated(whole, new Float64Array(700).fill(1));
  expect(Math.max(...sums) / 5).toBeGreaterThan(32767);
  check(
    whole,
    { bias: 350, scale: Math.fround(1 / 700), divisor: 700 },
    sums.map((sum) => Math.floor((2 * sum + 700) / 1400)),
  );
});
