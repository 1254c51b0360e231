import { expect, test } from "vitest";
import { box, createEngine, gaussian, type Filter, type Raster } from "../../src/index.js";
import { applicable } from "../support/answers.js";
import { builds, engines } from "../support/engines.js";
import { kernelsOfEveryKind, noiseKernel } from "../support/kernels.js";
import { firstDifference } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import { layoutOf } from "../support/questions.js";

const image = noiseImage("u8", 97, 61, 4, 3);
const tall = noiseImage("u8", 256, 700, 4, 5);
const kernel = noiseKernel(9, 9, 4);

function tallFilter(): Filter {
  return engines.simd.prepare(kernel, layoutOf(tall), { method: "direct" });
}

const outcome = async (running: Promise<unknown>): Promise<unknown> =>
  running.then(
    (value) => ({ value }),
    (reason: unknown) => ({ reason }),
  );

test.each(kernelsOfEveryKind)("runAsync gives the bytes of run, with every method: %s", async (_, taps) => {
  for (const build of builds) {
    for (const { method } of applicable(build, { image, kernel: taps })) {
      const filter = engines[build].prepare(taps, layoutOf(image), { method });
      const expected = filter.run(image).data;
      const progress: number[] = [];
      const found = await filter.runAsync(image, { onProgress: (done) => progress.push(done) });
      expect(firstDifference(found.data, expected), `${build} ${method}`).toBeUndefined();
      expect(progress.at(-1)).toBe(1);
      expect(progress).toEqual(progress.toSorted((a, b) => a - b));
      const target: Raster = { data: new Uint8Array(image.data.length), width: 97, height: 61, channels: 4 };
      expect(await filter.runAsync(image, { target })).toBe(target);
      expect(firstDifference(target.data, expected)).toBeUndefined();
      filter.dispose();
    }
  }
});

test("jobs of one filter end in the order in which they were asked for, each with its own image", async () => {
  const filter = tallFilter();
  const images = [7, 8, 9].map((seed) => noiseImage("u8", 256, 700, 4, seed));
  const expected = images.map((each) => filter.run(each).data);
  const ends: number[] = [];
  const results = await Promise.all(images.map((each, index) => filter.runAsync(each).finally(() => ends.push(index))));
  expect(ends).toEqual([0, 1, 2]);
  results.forEach(({ data }, index) => expect(firstDifference(data, expected[index]!)).toBeUndefined());
  filter.dispose();
});

test("a job reads what the one before it in the same filter writes", async () => {
  const filter = tallFilter();
  const between: Raster<Uint8Array> = { data: new Uint8Array(tall.data.length), width: 256, height: 700, channels: 4 };
  const [, twice] = await Promise.all([filter.runAsync(tall, { target: between }), filter.runAsync(between)]);
  expect(firstDifference(twice.data, filter.run(filter.run(tall)).data)).toBeUndefined();
  filter.dispose();
});

/** Reasons as callers give them, and one that a signal of its own kind may have. */
test.each<[string, unknown]>([
  ["an error", new Error("enough")],
  ["a string", "enough"],
  ["null", null],
  ["a number", 0],
  ["an object", { because: "enough" }],
])("an aborted job is rejected with the signal's own reason: %s", async (_, reason) => {
  const filter = tallFilter();
  const expected = filter.run(tall).data;
  for (const when of ["before the start", "while it waits", "between slices"]) {
    const controller = new AbortController();
    if (when === "before the start") controller.abort(reason);
    const onProgress = () => (when === "between slices" ? controller.abort(reason) : undefined);
    const running = outcome(filter.runAsync(tall, { signal: controller.signal, onProgress }));
    if (when === "while it waits") controller.abort(reason);
    expect(await running, when).toEqual({ reason });
    expect(firstDifference(filter.run(tall).data, expected), when).toBeUndefined();
  }
  filter.dispose();
});

test("a signal without a reason of its own, and one of another kind, reject with what their reason is", async () => {
  const filter = tallFilter();
  const controller = new AbortController();
  controller.abort();
  expect(await outcome(filter.runAsync(tall, { signal: controller.signal }))).toEqual({ reason: controller.signal.reason });
  const plain = { aborted: true, reason: undefined, addEventListener: () => undefined, removeEventListener: () => undefined } as unknown as AbortSignal;
  expect(await outcome(filter.runAsync(tall, { signal: plain }))).toEqual({ reason: undefined });
  filter.dispose();
});

test("abort after the end changes nothing", async () => {
  const filter = tallFilter();
  const controller = new AbortController();
  const found = await filter.runAsync(tall, { signal: controller.signal });
  controller.abort("late");
  expect(firstDifference(found.data, filter.run(tall).data)).toBeUndefined();
  filter.dispose();
});

test("aborting one job leaves those before and behind it", async () => {
  const filter = tallFilter();
  const expected = filter.run(tall).data;
  const controller = new AbortController();
  const first = filter.runAsync(tall);
  const second = outcome(filter.runAsync(tall, { signal: controller.signal }));
  const third = filter.runAsync(tall);
  controller.abort("the second");
  expect(await second).toEqual({ reason: "the second" });
  for (const { data } of await Promise.all([first, third])) expect(firstDifference(data, expected)).toBeUndefined();
  filter.dispose();
});

test("what onProgress throws ends its job alone, and the filter is as before", async () => {
  const filter = tallFilter();
  const failure = new Error("from the caller's own code");
  const thrown = outcome(
    filter.runAsync(tall, {
      onProgress: () => {
        throw failure;
      },
    }),
  );
  const next = filter.runAsync(tall);
  expect(await thrown).toEqual({ reason: failure });
  expect(firstDifference((await next).data, filter.run(tall).data)).toBeUndefined();
  filter.dispose();
});

test("a filter may be disposed from onProgress: the promise is rejected, others go on", async () => {
  const [filter, other] = [tallFilter(), tallFilter()];
  const running = outcome(filter.runAsync(tall, { onProgress: () => filter.dispose() }));
  const beside = other.runAsync(tall);
  expect(await running).toMatchObject({ reason: { code: "disposed", fault: "state" } });
  expect(firstDifference((await beside).data, other.run(tall).data)).toBeUndefined();
  other.dispose();
});

test("filters may be prepared between slices: the memory grows and no byte changes", async () => {
  const engine = await createEngine();
  const filters = [
    engine.prepare(kernel, layoutOf(tall), { method: "direct" }),
    engine.prepare(gaussian(3), layoutOf(tall), { method: "separable" }),
    engine.prepare(kernel, layoutOf(tall), { method: "fft" }),
    engine.prepare(box(31), layoutOf(tall), { method: "running-sum" }),
  ];
  const expected = filters.map((filter) => filter.run(tall).data);
  let prepared = 0;
  const grow = () => {
    if (prepared++ < 20) engine.prepare(noiseKernel(31, 31, 2), layoutOf(tall), { method: "fft" });
  };
  const results = await Promise.all(filters.map((filter) => filter.runAsync(tall, { onProgress: grow })));
  expect(prepared).toBeGreaterThan(3);
  results.forEach(({ data }, index) => expect(firstDifference(data, expected[index]!)).toBeUndefined());
  engine.dispose();
});
