import { describe, expect, test } from "vitest";
import {
  box,
  createEngine,
  gaussian,
  type BorderRule,
  type Channels,
  type ConvolveOptions,
  type Extent,
  type Filter,
  type Method,
  type Raster,
  type Samples,
  type SampleType,
} from "../../src/index.js";
import { builds, engines } from "../support/engines.js";
import { noiseKernel } from "../support/kernels.js";
import { firstDifference } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import { layoutOf } from "../support/questions.js";

const rules: BorderRule[] = ["replicate", "zero", "periodic", "half-sample-symmetric", "whole-sample-symmetric", { constant: 1 }];
const extents: Extent[] = ["same", "full", "valid"];
const kernels: readonly [Method, ReturnType<typeof box>][] = [
  ["direct", noiseKernel(5, 4, 1, { x: 1, y: 3 })],
  ["separable", gaussian({ sigma: 1.5, radius: 3 })],
  ["running-sum", box({ width: 6, height: 5 })],
  ["fft", noiseKernel(9, 7, 2)],
];

/** Fills the filter's own source, as a page does that draws into it. */
function fill(filter: Filter, image: Raster): void {
  (filter.source.data as Samples).set(image.data);
}

/** What the view way and the copying way give for one filter. */
function compare(filter: Filter, image: Raster, label: string): void {
  const copied = filter.run(image);
  fill(filter, image);
  const own = filter.run();
  expect(own.data.byteOffset, label).toBe(filter.result.data.byteOffset);
  expect(firstDifference(own.data, copied.data), `${label}, source and result`).toBeUndefined();
  expect(firstDifference(filter.source.data, image.data), `${label}, the source is as it was`).toBeUndefined();
  expect(firstDifference(filter.run(filter.source).data, copied.data), `${label}, out of the source`).toBeUndefined();
  filter.result.data.fill(0);
  filter.run(image, filter.result);
  expect(firstDifference(filter.result.data, copied.data), `${label}, into the result`).toBeUndefined();
}

describe.each<SampleType>(["u8", "u16", "f32"])("%s", (sample) => {
  test.each<Channels>([1, 2, 3, 4])("rows read and written in place give the bytes of rows that are copied: %i channels", (channels) => {
    const image = noiseImage(sample, 37, 23, channels, 11);
    const alphas = channels === 2 || channels === 4 ? (["straight", "premultiplied", "keep", "none"] as const) : (["none"] as const);
    for (const build of builds) {
      for (const [method, kernel] of kernels) {
        extents.forEach((extent, index) => {
          rules.forEach((border, rule) => {
            const alpha = alphas[(index + rule) % alphas.length]!;
            const options: ConvolveOptions = {
              method,
              extent,
              alpha,
              ...(extent === "valid" ? {} : { border: { rows: border, columns: rules[(rule + index) % rules.length]! } }),
            };
            const filter = engines[build].prepare(kernel, layoutOf(image), options);
            compare(filter as Filter, image, `${build} ${JSON.stringify(options)}`);
            filter.dispose();
          });
        });
      }
    }
  });
});

test("regions, other sample types, correlation and linear light work in place too", () => {
  const image = noiseImage("u8", 50, 40, 4, 12);
  const all: (ConvolveOptions & { correlate?: boolean })[] = [
    { region: { x: 7, y: 5, width: 31, height: 22 } },
    { region: { x: 0, y: 39, width: 1, height: 1 }, border: "periodic" },
    { output: { sample: "f32", gain: 1 / 255 } },
    { output: { sample: "u16", gain: 257, offset: 3 } },
    { light: "linear", correlate: true },
    { alpha: "keep", correlate: true, border: "zero" },
  ];
  for (const options of all) {
    for (const [method, kernel] of kernels) {
      const filter = engines.simd.prepare(kernel, layoutOf(image), { ...options, method }) as Filter;
      compare(filter, image, JSON.stringify({ ...options, method }));
      filter.dispose();
    }
  }
});

test("images that are cut into panels are read and written in place", async () => {
  const image = noiseImage("u8", 3000, 30, 4, 13);
  const small = engines.simd.explain(box(3), layoutOf(image)).bytes;
  for (const [method, kernel] of kernels) {
    const whole = engines.simd.explain(kernel, layoutOf(image), { method }).bytes;
    const engine = await createEngine({ memoryLimit: Math.ceil(0.35 * whole) + small + 65536 + 2 * (image.data.length + 128) });
    const block = engine.prepare(box(3), { width: 3000, height: 30, channels: 4 });
    fill(block as Filter, image);
    void block.result;
    const filter = engine.prepare(kernel, layoutOf(image), { method });
    expect(filter.explanation.bytes, method).toBeLessThan(whole);
    const copied = filter.run(image).data;
    filter.run(block.source, block.result);
    expect(firstDifference(block.result.data, copied), method).toBeUndefined();
    engine.dispose();
  }
});

test("two filters in a chain pass a view on, also while the memory grows between", async () => {
  const image = noiseImage("u8", 61, 43, 4, 14);
  for (const build of builds) {
    const engine = await createEngine({ build });
    const [first, second] = [engine.prepare(gaussian(2), layoutOf(image)), engine.prepare(noiseKernel(5, 5, 3), layoutOf(image))];
    const expected = second.run(first.run(image)).data;
    fill(first as Filter, image);
    first.run();
    const before = first.result.data.buffer;
    for (let times = 0; times < 30; times++) engine.prepare(noiseKernel(15, 15, 3), layoutOf(image), { method: "fft" });
    expect(first.result.data.buffer).not.toBe(before);
    expect(firstDifference(second.run(first.result, second.result).data, expected)).toBeUndefined();
    second.result.data.fill(0);
    const running = second.runAsync(first.result, { target: second.result });
    for (let times = 0; times < 60; times++) engine.prepare(noiseKernel(15, 15, 3), layoutOf(image), { method: "fft" });
    await running;
    expect(firstDifference(second.result.data, expected)).toBeUndefined();
    engine.dispose();
  }
});

test("runAsync without image and target reads the source and gives the result", async () => {
  const image = noiseImage("u16", 61, 43, 3, 15);
  const engine = await createEngine();
  const filter = engine.prepare(gaussian(2), layoutOf(image));
  fill(filter as Filter, image);
  const expected = filter.run(image).data;
  const found = await filter.runAsync();
  expect(firstDifference(found.data, expected)).toBeUndefined();
  expect(found.data.byteOffset).toBe(filter.result.data.byteOffset);
  engine.dispose();
});

test("views are counted apart, reserved at first use, and end with their filter", async () => {
  const engine = await createEngine();
  const filter = engine.prepare(box(3), { width: 40, height: 30, channels: 4 });
  const { bytes } = filter.explanation;
  expect(filter.viewBytes).toBe(0);
  const old = filter.source;
  expect(filter.viewBytes).toBeGreaterThanOrEqual(4800);
  expect(filter.viewBytes).toBeLessThanOrEqual(4800 + 128);
  void filter.result;
  expect(filter.viewBytes).toBeLessThanOrEqual(2 * (4800 + 128));
  expect(filter.explanation.bytes).toBe(bytes);
  const other = engine.prepare(box(3), { width: 40, height: 30, channels: 4 });
  const running = other.runAsync(filter.source, { target: other.result });
  filter.dispose();
  await running;
  expect(filter.viewBytes).toBe(0);
  expect(() => filter.source).toThrow(/disposed/);
  expect(() => other.run(old)).toThrow(/view of a filter that was disposed|detached/);
  expect(() => other.run(other.source, old)).toThrow(/view of a filter that was disposed|detached/);
  engine.dispose();
});

test("source and target in one stretch of memory are refused as elsewhere", async () => {
  const engine = await createEngine();
  const filter = engine.prepare(box(3), { width: 8, height: 8 });
  expect(() => filter.run(filter.source, filter.source)).toThrow(/same stretch/);
  expect(() => filter.run(filter.result)).not.toThrow();
  expect(() => filter.run(filter.result, filter.result)).toThrow(/same stretch/);
  engine.dispose();
});

test("the first run of views is right where reserving the result makes the memory grow", async () => {
  const image = noiseImage("u8", 1000, 700, 4, 3);
  const engine = await createEngine();
  const prepared = (): Filter => engine.prepare(gaussian(2), layoutOf(image)) as Filter;
  const copied = prepared().run(image);
  for (const run of [(filter: Filter) => filter.run(), (filter: Filter) => filter.runAsync()]) {
    const filter = prepared();
    fill(filter, image);
    const own = await run(filter);
    expect(firstDifference(own.data, copied.data)).toBeUndefined();
  }
  engine.dispose();
});
