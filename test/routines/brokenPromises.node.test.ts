import { describe, expect, test } from "vitest";
import * as field from "../../src/generated/record.js";
import type { Job } from "./bench.js";
import { bench, forms, inner } from "./debugCore.js";
import { enterFields } from "./enterJob.js";
import { commonFields, ring, sweeping } from "./sweepJob.js";
import { placePlan } from "./transformPlan.js";

/** Something that a caller may get wrong: it changes a job or the arguments of a call that would be in order. */
type Break = (job: Job, given: Record<string, number>) => void;

/** The call is in order as it stands, and traps once it is broken, before anything is written. */
function expectTrap(prepare: () => { job: Job; given: Record<string, number>; call: (wide: boolean) => void }, broken: Break): void {
  for (const { wide } of forms) {
    bench.clear();
    prepare().call(wide);
    expect(bench.damage()).toBeUndefined();
    bench.clear();
    const { job, given, call } = prepare();
    broken(job, given);
    const before = new Uint8Array(bench.memory.buffer).slice();
    // The assert's own trap: not a load or store outside the memory.
    expect(() => call(wide)).toThrow(/unreachable/);
    expect(Buffer.compare(before, new Uint8Array(bench.memory.buffer))).toBe(0);
  }
}

describe("a row that enters", () => {
  const prepare = () => {
    const job = enterFields(bench, bench.job(), { sample: "u8", channels: 2, columns: [-1, 0, 1, 2, 0], rows: [0, -1], sourceColumns: 3 });
    const given = { out: bench.take(64), row: 0, source: bench.take(64) };
    return { job, given, call: (wide: boolean) => inner.enterRow(wide, job.address, given.out, given.row, given.source) };
  };

  test.each<[string, Break]>([
    ["a sample type there is none", (job) => job.integer(field.SOURCE_KIND, 3)],
    ["five channels", (job) => job.integer(field.CHANNELS, 5)],
    ["colours and channels that do not match", (job) => job.integer(field.COLOURS, 4)],
    ["premultiplied without an alpha", (job) => job.integer(field.PREMULTIPLY, 1)],
    ["decoded without a curve", (job) => job.integer(field.DECODE, 1).float(field.WORKING_FULL, 1)],
    ["a working unit that is not the source's", (job) => job.float(field.WORKING_FULL, 2)],
    ["a stretch past the row", (job) => job.integer(field.RUN_COLUMN, 4)],
    ["a stretch past the staged samples", (job) => job.integer(field.RUN_SOURCE, 2)],
    ["columns that nobody fills", (job) => job.integer(field.HALO_COUNT, 1)],
    ["a row above the image", (_, given) => (given.row = -1)],
    ["a row below the image", (_, given) => (given.row = 2)],
    ["an output off its boundary", (_, given) => (given.out! += 4)],
    ["an output on the source", (_, given) => (given.source = given.out! + 8)],
    ["a source outside the memory", (_, given) => (given.source = bench.memory.buffer.byteLength - 3)],
    ["no source", (_, given) => (given.source = 0)],
  ])("traps on %s", (_, broken) => expectTrap(prepare, broken));
});

describe("a row that leaves", () => {
  const prepare = () => {
    const job = enterFields(bench, bench.job(), { sample: "u8", channels: 4, columns: [0, 1], rows: [0], sourceColumns: 2 })
      .integer(field.COLOURS, 3)
      .integer(field.OUTPUT_KIND, 1)
      .integer(field.OUTPUT_COLUMNS, 2)
      .integer(field.OUTPUT_ROWS, 1)
      .integer(field.OUTPUT_STRIDE, 16)
      .float(field.GAIN, 1)
      .float(field.OUTPUT_FULL, 65535)
      .integer(field.ALPHA, 1)
      .float(field.OPAQUE_SUM, 255);
    const given = { y: bench.take(32), row: 0, out: bench.take(16) };
    return { job, given, call: (wide: boolean) => inner.leaveRow(wide, job.address, given.y, given.row, given.out) };
  };

  test.each<[string, Break]>([
    ["an output type there is none", (job) => job.integer(field.OUTPUT_KIND, -1)],
    ["an alpha mode there is none", (job) => job.integer(field.ALPHA, 4)],
    ["alpha without a channel for it", (job) => job.integer(field.COLOURS, 4)],
    ["straight alpha of a kernel that sums to 0", (job) => job.float(field.OPAQUE_SUM, 0)],
    ["a gain that is no number", (job) => job.float(field.GAIN, NaN)],
    ["a row too long for its place", (job) => job.integer(field.OUTPUT_STRIDE, 15)],
    [
      "a weight pattern there is none",
      (job) =>
        job
          .integer(field.WEIGHTS, 64)
          .integer(field.WEIGHT_ROWS, bench.place(Int32Array.of(0)))
          .integer(field.WEIGHT_COLUMNS, bench.place(Int32Array.of(0, 1)))
          .integer(field.WEIGHT_STRIDE, 1),
    ],
    ["a row below the image", (_, given) => (given.row = 1)],
    ["an output off its samples", (_, given) => (given.out! += 1)],
    ["an output on the row", (_, given) => (given.out = given.y! + 16)],
  ])("traps on %s", (_, broken) => expectTrap(prepare, broken));
});

describe("a correlation", () => {
  const prepare = () => {
    const rows = [0, 1, 2].map(() => bench.take(4 * 12));
    const given = { out0: bench.take(32), out1: bench.take(32), rows: bench.place(Int32Array.from(rows)), taps: bench.take(24), n: 2, m: 3, step: 8, count: 8 };
    const { job } = { job: bench.job() };
    const call = (wide: boolean) => inner.correlateRows(wide, given.out0, given.out1, given.rows, given.taps, given.n, given.m, given.step, given.count);
    return { job, given, call };
  };

  test.each<[string, Break]>([
    ["no taps in a row", (_, given) => (given.m = 0)],
    ["no rows of taps", (_, given) => (given.n = 0)],
    ["a count that is not in fours", (_, given) => (given.count = 6)],
    ["nothing to compute", (_, given) => (given.count = 0)],
    ["a step of part of a float", (_, given) => (given.step = 6)],
    ["results on one another", (_, given) => (given.out1 = given.out0! + 16)],
    ["results on a row that is still to be read", (_, given) => (given.out1 = bench.view(Int32Array, given.rows!, 3)[2]! + 16)],
    ["a result off its floats", (_, given) => (given.out0! += 2)],
    ["a row that is not there", (_, given) => (bench.view(Int32Array, given.rows!, 3)[1] = 0)],
  ])("traps on %s", (_, broken) => expectTrap(prepare, broken));
});

describe("a transform", () => {
  const prepare = () => {
    const plan = placePlan(bench, [3, 4]);
    const given = { plan, base: bench.take(2 * 12 * 16), stride: 16, apart: 12 * 16, vectors: 1 };
    const call = (wide: boolean) => inner.forwardTransform(wide, given.plan, given.base, given.stride, given.apart, given.vectors);
    return { job: bench.job(), given, call };
  };
  const passes = (given: Record<string, number>) => bench.view(Int32Array, given.plan!, 7);

  test.each<[string, Break]>([
    ["no passes", (_, given) => (passes(given)[0] = 0)],
    ["a radix there is none", (_, given) => (passes(given)[1] = 6)],
    ["radices that do not multiply to the points", (_, given) => (passes(given)[4] = 2)],
    ["a span that is not what is left", (_, given) => (passes(given)[5] = 12)],
    ["turns that are not there", (_, given) => (passes(given)[3] = 0)],
    ["imaginary parts among the real ones", (_, given) => (given.apart = 16)],
    ["rows closer than a vector", (_, given) => (given.stride = 0)],
    ["points outside the memory", (_, given) => (given.base = bench.memory.buffer.byteLength - 64)],
    ["points off their boundary", (_, given) => (given.base! += 2)],
  ])("traps on %s", (_, broken) => expectTrap(prepare, broken));
});

describe("a sweep", () => {
  const prepare = () => {
    const stated = { ...sweeping({ sample: "u8", channels: 1, columns: 8, rows: 3, m: 3, n: 2 }), samples: [] };
    const table = bench.place(Int32Array.from(ring(bench, 3, 4 * 12)));
    const job = commonFields(bench, stated).integer(field.TAPS, bench.take(24)).integer(field.RING_ROWS, 3).integer(field.ROW_TABLE, table);
    const given = { from: 0, to: 3, table };
    return { job, given, call: () => inner.sweepDirect(job.address, given.from, given.to, 0) };
  };

  test.each<[string, Break]>([
    ["no rows to compute", (_, given) => (given.to = 0)],
    ["rows above the image", (_, given) => (given.from = -2)],
    ["rows below the image", (_, given) => (given.to = 4)],
    ["a kernel without rows", (job) => job.integer(field.KERNEL_ROWS, 0)],
    ["an extended image that does not fit the results", (job) => job.integer(field.EXTENDED_COLUMNS, 11)],
    ["results that are not in fours", (job) => job.integer(field.RESULT_FLOATS, 9)],
    ["result rows on one another", (job) => job.integer(field.RESULT_STRIDE, 16)],
    ["a ring that is too small", (job) => job.integer(field.RING_ROWS, 2)],
    ["a pointer table that does not go round twice", (_, given) => (bench.view(Int32Array, given.table!, 6)[4] = bench.view(Int32Array, given.table!, 6)[0]!)],
  ])("traps on %s", (_, broken) => expectTrap(prepare, broken));
});
