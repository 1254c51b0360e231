import { expect, test } from "vitest";
import { gamma } from "../../src/math/rounding.js";
import { bench, forms, inner } from "./debugCore.js";
import { enterFields, extendedRow, sampleTypes, samplesOf, type Entering } from "./enterJob.js";
import * as field from "../../src/generated/record.js";

const channelCounts = [1, 2, 3, 4];
const plain = (sample: Entering["sample"], channels: number): Entering => ({ sample, channels, columns: [0], rows: [0], sourceColumns: 1 });

test.each(sampleTypes)("$sample: 1 to 40 samples become the floats that they are, from every misaligned start", ({ sample, make, code }) => {
  for (const { wide } of forms) {
    for (let count = 1; count <= 40; count++) {
      for (const start of [0, 1, 2, 3, 7]) {
        bench.clear();
        const job = enterFields(bench, bench.job(), plain(sample, 1));
        const samples = samplesOf(sample, count, count + start);
        const source = bench.place(make.from(samples), { misaligned: start << code });
        const out = bench.take(4 * count);
        inner.enterPixels(wide, job.address, out, source, count);
        expect(bench.floats(out, count)).toEqual(Float32Array.from(samples));
        expect(bench.damage()).toBeUndefined();
      }
    }
  }
});

test("floats below 2⁻¹⁰⁰ become 0; all others, NaN and infinities stay what they are", () => {
  const least = 2 ** -100;
  const below = Math.fround(least * (1 - 2 ** -24));
  const kept = [1, -1, least, -least, 3e38, NaN, Infinity, -Infinity, 0];
  const gone = [below, -below, 1e-40, -1e-40, 2 ** -149, -(2 ** -126)].map(Math.fround);
  for (const { wide } of forms) {
    for (let start = 0; start < 16; start++) {
      bench.clear();
      const samples = Float32Array.from([...Array.from({ length: start }, () => 0.5), ...kept, ...gone, ...kept, ...gone]);
      const out = bench.take(samples.byteLength);
      inner.enterPixels(wide, enterFields(bench, bench.job(), plain("f32", 1)).address, out, bench.place(samples), samples.length);
      const expected = samples.map((value) => (gone.includes(value) ? 0 : value));
      bench.floats(out, samples.length).forEach((value, k) => expect(value === expected[k] || (value !== value && expected[k] !== expected[k])).toBe(true));
    }
  }
});

test("every code of 8 and 16 bits becomes the float that it is", () => {
  for (const { sample, make, full } of sampleTypes.slice(0, 2)) {
    for (const { wide } of forms) {
      bench.clear();
      const codes = Float32Array.from({ length: full + 1 }, (_, code) => code);
      const out = bench.take(codes.byteLength);
      inner.enterPixels(wide, enterFields(bench, bench.job(), plain(sample, 1)).address, out, bench.place(make.from(codes)), codes.length);
      expect(bench.floats(out, codes.length).every((value, code) => value === code)).toBe(true);
    }
  }
});

/** Extended columns that take from everywhere: constants, a staged column that is not in the stretch, columns of the stretch. */
function mapsFor(columns: number): { columns: number[]; sourceColumns: number } {
  const stretch = Array.from({ length: columns }, (_, k) => k + 1);
  return { columns: [-1, columns + 1, 0, ...stretch, 1, columns + 1, 0, -1], sourceColumns: columns + 2 };
}

test.each(sampleTypes)(
  "$sample: an extended row is the stretch, the halo by its map, the constants, with any channels and strides",
  ({ sample, make, code }) => {
    for (const channels of channelCounts) {
      for (let stretch = 2; stretch <= 37; stretch += 5) {
        const stated: Entering = { sample, channels, ...mapsFor(stretch), rows: [1, -1, 0] };
        const rowSamples = stated.sourceColumns * channels;
        const samples = samplesOf(sample, 2 * rowSamples, 17 * stretch + channels);
        const count = stated.columns.length * channels;
        const results = forms.map(({ wide }) => {
          bench.clear();
          const job = enterFields(bench, bench.job(), stated);
          const source = bench.place(make.from(samples), { misaligned: 1 << code });
          inner.enterConstants(job.address, 0, 0, 0);
          return stated.rows.map((_, row) => {
            const out = bench.take(4 * count);
            inner.enterRow(wide, job.address, out, row, source + ((Math.max(0, stated.rows[row]!) * rowSamples) << code));
            expect(Array.from(bench.floats(out, count))).toEqual(Array.from(extendedRow(stated, row, samples)));
            expect(bench.damage()).toBeUndefined();
            return bench.floats(out, count);
          });
        });
        expect(results[0]).toEqual(results[1]);
      }
    }
  },
);

test.each(sampleTypes)("$sample: colours are multiplied by alpha ÷ full, within two roundings, and unchanged where opaque", ({ sample, make, full }) => {
  for (const { wide } of forms) {
    for (const channels of [2, 4]) {
      bench.clear();
      const pixels = 29;
      const job = enterFields(bench, bench.job(), { ...plain(sample, channels), premultiply: true });
      const samples = samplesOf(sample, pixels * channels, 5).map((x, k) =>
        k % channels < channels - 1 ? x : k % 3 === 0 ? full : k % 3 === 1 ? 0 : Math.abs(x),
      );
      const out = bench.take(4 * pixels * channels);
      inner.enterPixels(wide, job.address, out, bench.place(make.from(samples)), pixels);
      const found = bench.floats(out, pixels * channels);
      for (let k = 0; k < found.length; k++) {
        const alpha = samples[k - (k % channels) + channels - 1]!;
        if (k % channels === channels - 1) expect(found[k]).toBe(samples[k]);
        else if (alpha === full) expect(found[k]).toBe(samples[k]);
        else expect(Math.abs(found[k]! - (alpha / full) * samples[k]!)).toBeLessThanOrEqual(gamma(2) * Math.abs((alpha / full) * samples[k]!));
      }
    }
  }
});

test.each(sampleTypes)("$sample: linear light decodes colours by the curve and brings alpha to 0 … 1", ({ sample, make, full }) => {
  for (const { wide } of forms) {
    for (const channels of channelCounts) {
      bench.clear();
      const job = enterFields(bench, bench.job(), { ...plain(sample, channels), decode: true });
      if (sample !== "f32") inner.decodeCurve(job.address, 0, full + 1, 0);
      const pixels = 23;
      const samples = samplesOf(sample, pixels * channels, 9);
      const out = bench.take(4 * pixels * channels);
      inner.enterPixels(wide, job.address, out, bench.place(make.from(samples)), pixels);
      const expected = Float32Array.from(samples, (x, k) =>
        channels % 2 === 0 && k % channels === channels - 1 ? Math.fround(x) / full : inner.decode(Math.fround(x / full)),
      );
      expect(bench.floats(out, pixels * channels)).toEqual(expected);
    }
  }
});

test("constants enter like samples: decoded and premultiplied", () => {
  bench.clear();
  const job = enterFields(bench, bench.job(), { sample: "u8", channels: 4, columns: [0, 1, 2], rows: [0], sourceColumns: 3, premultiply: true, decode: true });
  inner.decodeCurve(job.address, 0, 256, 0);
  inner.enterConstants(job.address, 0, 0, 0);
  const at = (offset: number): number => bench.view(Int32Array, job.address + offset, 1)[0]!;
  const pixel = (first: number): number[] => {
    const alpha = Math.fround((first + 3) / 255);
    return [0, 1, 2].map((c) => Math.fround(alpha * inner.decode(Math.fround((first + c) / 255)))).concat(alpha);
  };
  expect(Array.from(bench.floats(at(field.CONSTANT_COLUMN), 4))).toEqual(pixel(11));
  expect(Array.from(bench.floats(at(field.CONSTANT_ROW), 12))).toEqual([...pixel(1), ...pixel(1), ...pixel(1)]);
  expect(bench.damage()).toBeUndefined();
});
