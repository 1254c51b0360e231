import { describe, expect, test } from "vitest";
import * as field from "../../src/generated/record.js";
import { gamma } from "../../src/math/rounding.js";
import type { SampleType } from "../../src/types.js";
import type { Job } from "./bench.js";
import { bench, forms, inner } from "./debugCore.js";
import { enterFields, factsOf, sampleTypes, samplesOf } from "./enterJob.js";

const alphaCodes = { none: 0, straight: 1, premultiplied: 2, keep: 3 };

interface Leaving {
  output: SampleType;
  channels: number;
  columns: number;
  alpha?: keyof typeof alphaCodes;
  gain?: number;
  offset?: number;
  source?: SampleType;
  linear?: boolean;
}

/** A job of one result row. Working floats are in the source's units, or 0 … 1 in linear light. */
function leaveJob({ output, channels, columns, alpha = "none", gain = 1, offset = 0, source = "u8", linear = false }: Leaving): Job {
  const columnMap = Array.from({ length: columns }, (_, k) => k);
  const { code, full } = factsOf(output);
  return enterFields(bench, bench.job(), { sample: source, channels, columns: columnMap, rows: [0], sourceColumns: columns, decode: linear })
    .integer(field.COLOURS, alpha === "none" ? channels : channels - 1)
    .integer(field.OUTPUT_KIND, code)
    .integer(field.OUTPUT_COLUMNS, columns)
    .integer(field.OUTPUT_ROWS, 1)
    .integer(field.OUTPUT_STRIDE, (columns * channels) << code)
    .float(field.GAIN, gain)
    .float(field.OFFSET, offset)
    .float(field.OUTPUT_FULL, full)
    .integer(field.ALPHA, alphaCodes[alpha])
    .float(field.OPAQUE_SUM, linear ? 1 : factsOf(source).full);
}

/** One row of working floats leaves; samples of the output's type, from both forms, which must agree. */
function left(stated: Leaving, values: ArrayLike<number>, adjust: (job: Job) => void = () => {}): ArrayLike<number> {
  const { make, code } = factsOf(stated.output);
  const count = stated.columns * stated.channels;
  const results = forms.flatMap(({ wide }) =>
    [0, 1, 3].map((misaligned) => {
      bench.clear();
      const job = leaveJob(stated);
      adjust(job);
      const y = bench.place(Float32Array.from(values), { slackBytes: 4 * ((4 - (count % 4)) % 4) });
      const out = bench.take(count << code, misaligned << code);
      inner.leaveRow(wide, job.address, y, 0, out);
      expect(bench.damage()).toBeUndefined();
      return new make(bench.memory.buffer.slice(out, out + (count << code)));
    }),
  );
  for (const other of results) expect(other).toEqual(results[0]);
  return results[0]!;
}

/** ⌊y + ½⌋ held within 0 … full, NaN as 0. */
const rounded = (y: number, full: number): number => (Number.isNaN(y) ? 0 : Math.min(full, Math.max(0, Math.floor(y + 0.5))));

describe("rounding", () => {
  const edges = [0, -0, 0.25, 0.49999997, 0.5, 0.50000006, 1.5, 2.5, 2.4999998, -0.5, -0.49999997, -1, -1e30, 1e-40, NaN, Infinity, -Infinity, 1e30];
  const upper = (full: number): number[] => [full, full - 1, full - 0.5, full - 1.5, full + 0.25, full + 0.5, full + 1, 2 * full, 2 ** 24, 2 ** 31, 2 ** 32];

  test.each([
    { output: "u8", full: 255 },
    { output: "u16", full: 65535 },
  ] as const)("$output: ties go up, what is outside is held in range, NaN is 0, at every place of a vector", ({ output, full }) => {
    const values = [...edges, ...upper(full), Math.fround(full - 0.50001), Math.fround(127.49999), 32767.5, 32768.5].map(Math.fround);
    for (let shift = 0; shift < 17; shift++) {
      const row = [...samplesOf("u8", shift, shift), ...values];
      const found = left({ output, channels: 1, columns: row.length }, row);
      expect(Array.from(found)).toEqual(row.map((y) => rounded(y, full)));
    }
  });

  test.each([
    { output: "u8", full: 255 },
    { output: "u16", full: 65535 },
  ] as const)("$output: both neighbours of every tie, and the tie, go where ⌊y + ½⌋ says in exact arithmetic", ({ output, full }) => {
    const values: number[] = [];
    const step = full > 255 ? 37 : 1;
    for (let code = 0; code < full; code += step) {
      const tie = code + 0.5;
      const word = new Uint32Array(Float32Array.of(tie).buffer);
      const neighbour = (by: number): number => new Float32Array(Uint32Array.of(word[0]! + by).buffer)[0]!;
      values.push(neighbour(-1), tie, neighbour(1));
    }
    const found = left({ output, channels: 1, columns: values.length }, values);
    // y + ½ in double is exact for these floats.
    expect(Array.from(found)).toEqual(values.map((y) => rounded(y, full)));
  });

  test("floats leave as they are, signs of zeros and bits of large numbers included", () => {
    for (let count = 1; count <= 40; count++) {
      const values = Float32Array.from({ length: count }, (_, k) => [-0, 1.5, -3e38, 1e-42, Infinity][k % 5]!);
      const found = left({ output: "f32", channels: 1, columns: count }, values);
      expect(Array.from(found).every((value, k) => Object.is(value, values[k]))).toBe(true);
    }
  });
});

test.each(sampleTypes)("$sample: 1 to 40 results leave by gain · y + offset, any misaligned place", ({ sample, full }) => {
  for (let columns = 1; columns <= 40; columns++) {
    const values = samplesOf("u8", columns, columns);
    const found = left({ output: sample, channels: 1, columns, gain: -0.5, offset: 100 }, values);
    const exact = Array.from(values, (y) => -0.5 * y + 100);
    expect(Array.from(found)).toEqual(sample === "f32" ? exact : exact.map((y) => rounded(y, full)));
  }
});

test("rounding to the integers that results must be comes before gain", () => {
  const values = [3.0000002, 2.9999998, -1.0000001, 40000.004, 0.4, -0.4].map(Math.fround);
  const found = left({ output: "f32", channels: 1, columns: 6, gain: 2 }, values, (job) => job.integer(field.ROUND, 1));
  expect(Array.from(found, (value) => value + 0)).toEqual([6, 6, -2, 80000, 0, 0]);
});

test("renormalised: each result is multiplied by its pattern's weight, and is 0 where nothing is inside", () => {
  for (const channels of [1, 3]) {
    const values = samplesOf("u8", 9 * channels, 3).map((x) => x + 1);
    const columnPatterns = [0, 1, 2, 2, 1, 0, 3, 3, 0];
    const weights = [9, 9, 9, 9, 2, 1, 0.75, 0];
    const found = left({ output: "f32", channels, columns: 9 }, values, (job) =>
      job
        .integer(field.WEIGHT_ROWS, bench.place(Int32Array.of(1)))
        .integer(field.WEIGHT_COLUMNS, bench.place(Int32Array.from(columnPatterns)))
        .integer(field.WEIGHTS, bench.place(Float32Array.from(weights)))
        .integer(field.WEIGHT_STRIDE, 4),
    );
    expect(Array.from(found)).toEqual(Array.from(values, (y, k) => y * weights[4 + columnPatterns[Math.floor(k / channels)]!]!));
  }
});

describe("alpha", () => {
  const tiny = 2 ** -20;

  test("straight: colours are divided by h∗a in units of Σh, alpha is h∗a ÷ Σh, hidden colours are 0", () => {
    const pixels = [
      [100, 50, 25, 255],
      [100, 50, 25, 127.5],
      [10, 20, 30, 0],
      [10, 20, 30, -4],
      [1, 2, 3, 0.2],
      [100, 50, 25, 255 - tiny],
      [7, 8, 9, NaN],
    ];
    const found = left({ output: "f32", channels: 4, columns: 7, alpha: "straight" }, pixels.flat(), (job) => job.float(field.ALPHA_BOUND, 2 * tiny));
    const expected = [
      [100, 50, 25, 1],
      [200, 100, 50, 0.5],
      [0, 0, 0, 0],
      [0, 0, 0, -4 / 255],
      [1275, 2550, 3825, 0.2 / 255],
      [100, 50, 25, 1],
      [0, 0, 0, NaN],
    ].flat();
    expected.forEach((value, k) => {
      if (Number.isNaN(value)) expect(found[k]).toBeNaN();
      else expect(Math.abs(found[k]! - value)).toBeLessThanOrEqual(gamma(4) * Math.abs(value));
    });
    const bytes = left({ output: "u8", channels: 4, columns: 7, alpha: "straight", gain: 0.5, offset: 3 }, pixels.flat(), (job) =>
      job.float(field.ALPHA_BOUND, 2 * tiny),
    );
    expect(Array.from(bytes)).toEqual([53, 28, 16, 255, 103, 53, 28, 128, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 53, 28, 16, 255, 0, 0, 0, 0]);
  });

  test("premultiplied: colours are held within 0 … a′ before gain and offset, alpha meets neither", () => {
    const pixels = [
      [100, -5, 90, 51],
      [100, 200, 300, 255],
      [1, 1, 1, -20],
      [50, 60, 70, 510],
    ];
    const found = left({ output: "u8", channels: 4, columns: 4, alpha: "premultiplied", gain: 2, offset: 1 }, pixels.flat());
    expect(Array.from(found)).toEqual([103, 1, 103, 51, 201, 255, 255, 255, 1, 1, 1, 0, 101, 121, 141, 255]);
  });

  test("keep: colours as they are, alpha from the bordered image at the anchor, on its way to another type", () => {
    const pixels = [
      [1, 2, 3, 99],
      [4, 5, 6, 99],
      [7, 8, 300, 99],
    ];
    const kept = Float32Array.of(0, 0, 0, 0, 9, 9, 9, 255, 9, 9, 9, 51, 9, 9, 9, 0);
    const found = left({ output: "u16", channels: 4, columns: 3, alpha: "keep", gain: 257 }, pixels.flat(), (job) =>
      job.integer(field.KEEP_ROW, bench.place(kept)).integer(field.ANCHOR_COLUMN, 1),
    );
    expect(Array.from(found)).toEqual([257, 514, 771, 65535, 1028, 1285, 1542, 13107, 1799, 2056, 65535, 0]);
  });
});

test.each([1, 2, 3, 4])("linear light is encoded before gain and offset, %i channels, alpha apart", (channels) => {
  const values = Array.from({ length: 12 * channels }, (_, k) => Math.fround(((k * 37) % 101) / 100));
  const withAlpha = channels % 2 === 0;
  const alpha = withAlpha ? ("premultiplied" as const) : ("none" as const);
  const found = left({ output: "f32", channels, columns: 12, alpha, linear: true, gain: 0.5, offset: 2 }, values);
  values.forEach((value, k) => {
    const a = values[k - (k % channels) + channels - 1]!;
    const colour = 255 * inner.encode(value);
    const expected = withAlpha && k % channels === channels - 1 ? value : 0.5 * (withAlpha ? Math.min(255 * a, colour) : colour) + 2;
    expect(Math.abs(found[k]! - expected)).toBeLessThanOrEqual(gamma(3) * (Math.abs(expected) + 2));
  });
});
