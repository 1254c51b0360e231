import { afterAll, describe, expect, test } from "vitest";
import { box, createEngine, gaussian, kernel, outer, type Border, type ConvolveOptions, type Kernel, type Method, type Raster } from "../../src/index.js";
import { noise, noiseSamples } from "../support/noise.js";
import { nodeWorker } from "../support/nodeWorkers.js";
import { eagerProfile } from "./eagerProfile.js";

const structureless = (columns: number, rows: number): Kernel => {
  const next = noise(columns * 100 + rows);
  const taps = Array.from({ length: rows }, () => Array.from({ length: columns }, () => 0.1 + next()));
  const sum = taps.flat().reduce((total, tap) => total + tap, 0);
  return kernel(taps.map((row) => row.map((tap) => tap / sum)));
};

const kernels: Record<Method, Kernel[]> = {
  "direct": [structureless(3, 3), structureless(4, 7), structureless(1, 9)],
  "separable": [gaussian({ sigma: 1.5, radius: 4 }), outer([1, 2, -1, 0.5], [3, 1])],
  "running-sum": [box(5), box({ width: 4, height: 9 })],
  "fft": [structureless(9, 9), structureless(4, 21)],
};
const borders: Border[] = ["replicate", "zero", "periodic", "half-sample-symmetric", { constant: 7 }, { rows: "periodic", columns: "zero" }, "renormalised"];
const sizes = [
  [67, 93],
  [128, 201],
  [31, 64],
] as const;

const build = { simd: await threaded("simd"), scalar: await threaded("scalar") };

async function threaded(name: "simd" | "scalar") {
  const profile = eagerProfile(name);
  const [one, two, three] = await Promise.all([1, 2, 3].map((threads) => createEngine({ build: name, profile, threads, createWorker: nodeWorker })));
  return { one: one!, several: [two!, three!] };
}

afterAll(() => {
  for (const { one, several } of Object.values(build)) for (const engine of [one, ...several]) engine.dispose();
});

function imageOf(sample: "u8" | "u16" | "f32", width: number, height: number, channels: 1 | 2 | 3 | 4): Raster {
  return { data: noiseSamples(sample, width * height * channels, width + height), width, height, channels };
}

const bytesOf = ({ data }: Raster): Buffer => Buffer.from(data.buffer, data.byteOffset, data.byteLength);

describe.each(["simd", "scalar"] as const)("%s: several threads give the bytes of one", (name) => {
  const { one, several } = build[name];

  /** Threads that took part, by engine, over all borders and sizes. */
  function compare(method: Method, image: (width: number, height: number) => Raster, options: ConvolveOptions): Set<number> {
    const seen = new Set<number>();
    for (const [index, border] of borders.entries()) {
      const [width, height] = sizes[index % sizes.length]!;
      for (const taps of kernels[method]) {
        if (border === "renormalised" && taps.taps.some((tap) => tap < 0)) continue;
        const source = image(width, height);
        const all = { ...options, border, method };
        const expected = bytesOf(one.convolve(source, taps, all));
        for (const engine of several) {
          const filter = engine.prepare(taps, { width, height, channels: source.channels!, sample: options.light ? "u8" : sampleOf(source) }, all);
          seen.add(filter.explanation.threads);
          for (let run = 0; run < 2; run += 1)
            expect(bytesOf(filter.run(source)).equals(expected), JSON.stringify({ border, width, height, taps: taps.width, run })).toBe(true);
          filter.dispose();
        }
      }
    }
    return seen;
  }

  const sampleOf = ({ data }: Raster) => (data instanceof Float32Array ? "f32" : data instanceof Uint16Array ? "u16" : "u8");

  test.each(Object.keys(kernels) as Method[])("%s: bytes, four channels, all borders", (method) => {
    const seen = compare(method, (width, height) => imageOf("u8", width, height, 4), { alpha: "none" });
    expect([...seen].some((threads) => threads > 1)).toBe(true);
  });

  test.each(Object.keys(kernels) as Method[])("%s: straight and kept alpha", (method) => {
    compare(method, (width, height) => imageOf("u8", width, height, 4), { alpha: "straight" });
    compare(method, (width, height) => imageOf("u8", width, height, 2), { alpha: "keep" });
  });

  test.each(Object.keys(kernels) as Method[])("%s: floats of three channels, 16-bit planes, linear light", (method) => {
    compare(method, (width, height) => imageOf("f32", width, height, 3), {});
    compare(method, (width, height) => imageOf("u16", width, height, 1), {});
    compare(method, (width, height) => imageOf("u8", width, height, 3), { light: "linear" });
  });

  test.each(Object.keys(kernels) as Method[])("%s: full and valid extents, regions, rows with a stride, targets with one", (method) => {
    const taps = kernels[method][0]!;
    for (const options of [{ extent: "full" }, { extent: "valid" }, { region: { x: 3, y: 40, width: 50, height: 41 } }] as ConvolveOptions[]) {
      const data = noiseSamples("u8", 90 * 101 * 3 + 55, 5);
      const source: Raster = { data, width: 90, height: 101, channels: 3, stride: 90 * 3 };
      const expected = one.convolve({ ...source, data: data.subarray(0, 90 * 101 * 3) }, taps, { ...options, method });
      for (const engine of several) {
        const filter = engine.prepare(taps, { width: 90, height: 101, channels: 3, sample: "u8" }, { ...options, method });
        const stride = expected.width * 3 + 5;
        const target: Raster = { ...expected, data: new Uint8Array(stride * expected.height).fill(9), stride };
        filter.run(source, target);
        const rows = Array.from({ length: expected.height }, (_, row) => bytesOf(target).subarray(row * stride, row * stride + expected.width * 3));
        expect(Buffer.concat(rows).equals(bytesOf(expected))).toBe(true);
        filter.dispose();
      }
    }
  });

  test.each(Object.keys(kernels) as Method[])("%s: runAsync, views of engine memory, shared arrays", async (method) => {
    const source = imageOf("u8", 96, 140, 4);
    const taps = kernels[method][0]!;
    const expected = bytesOf(one.convolve(source, taps, { method }));
    for (const engine of several) {
      const filter = engine.prepare(taps, { width: 96, height: 140, channels: 4 }, { method });
      const progress: number[] = [];
      expect(bytesOf(await filter.runAsync(source, { onProgress: (part) => progress.push(part) })).equals(expected)).toBe(true);
      expect(progress.at(-1)).toBe(1);
      expect(progress.toSorted((a, b) => a - b)).toEqual(progress);
      filter.source.data.set(source.data);
      expect(bytesOf(filter.run()).equals(expected)).toBe(true);
      const shared = new Uint8Array(new SharedArrayBuffer(source.data.length));
      shared.set(source.data);
      expect(bytesOf(filter.run({ ...source, data: shared })).equals(expected)).toBe(true);
      filter.dispose();
    }
  });
});

test("small images stay on one thread, large ones do not, and the explanation says so", async () => {
  const engine = await createEngine({ threads: 2, createWorker: nodeWorker });
  const small = engine.explain(gaussian({ sigma: 2 }), { width: 64, height: 64, channels: 4 });
  const large = engine.explain(gaussian({ sigma: 2 }), { width: 1920, height: 1080, channels: 4 });
  expect([small.threads, large.threads]).toEqual([1, 2]);
  expect(String(large)).toMatch(/on 2 threads/);
  expect(String(large)).toMatch(/threads/);
  engine.dispose();
});
