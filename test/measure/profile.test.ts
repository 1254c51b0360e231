import { afterEach, describe, expect, test } from "vitest";
import { createEngine, gaussian, type Build, type Engine, type EngineOptions, type HardwareProfile } from "../../src/index.js";
import { measureCrossover, measureProfile } from "../../src/measure/index.js";
import { profileBy } from "../../src/measure/profile.js";
import { operationNames } from "../../src/planning/cost.js";
import { hostPacing } from "../../src/runtime/pacing.js";
import { knownLimit, memoryLeft } from "./memoryLeft.js";

const short = 200;
const engines: Engine[] = [];

async function engineWith(options: EngineOptions = { memoryLimit: knownLimit }): Promise<Engine> {
  const engine = await createEngine(options);
  engines.push(engine);
  return engine;
}
afterEach(() => {
  for (const engine of engines.splice(0)) engine.dispose();
});

const image = { data: Uint8Array.of(0, 0, 9, 0, 0), width: 5, height: 1 };
const expectAlive = (engine: Engine): void => expect(engine.convolve(image, gaussian(1)).data[2]).toBe(4);

function expectWhole(profile: HardwareProfile, build: Build, threads = 1): void {
  expect(profile).toMatchObject({ version: 2, build, threads });
  expect(Object.keys(profile.nanoseconds)).toEqual(operationNames);
  for (const price of Object.values(profile.nanoseconds)) expect(Number.isFinite(price) && price >= 0).toBe(true);
  expect(Math.abs(Date.now() - Date.parse(profile.date))).toBeLessThan(600_000);
  expect(profile.host.length).toBeGreaterThan(3);
  expect(profile.notes!.length).toBeGreaterThan(0);
}

describe.each(["simd", "scalar"] as const)("a profile of the %s build, measured for real", (build) => {
  test("is whole, and an engine that takes it as JSON has it", async () => {
    const engine = await engineWith({ build });
    const profile = await measureProfile(engine, { milliseconds: short });
    expectWhole(profile, build);
    const fitted = await engineWith({ build, profile: JSON.parse(JSON.stringify(profile)) });
    expect(fitted.profile).toEqual(profile);
    expect(fitted.explain(gaussian(2), { width: 50, height: 40 }).profile).toBe(`${profile.host}. ${profile.notes!.join(" ")}`);
    expectAlive(fitted);
  });

  test("is measured again with an engine that has one", async () => {
    const engine = await engineWith({ build });
    const fitted = await engineWith({ build, profile: await measureProfile(engine, { milliseconds: short }) });
    expectWhole(await measureProfile(fitted, { milliseconds: short }), build);
  });
});

test("the engine's own profile stays, and its memory is as before", async () => {
  const engine = await engineWith();
  const before = { profile: engine.profile, left: memoryLeft(engine) };
  await measureProfile(engine, { milliseconds: short });
  expect({ profile: engine.profile, left: memoryLeft(engine) }).toEqual(before);
});

test("progress never falls, and ends with 1", async () => {
  const told: number[] = [];
  await measureProfile(await engineWith(), { milliseconds: 300, onProgress: (progress) => told.push(progress) });
  expect(told).toEqual(told.toSorted((a, b) => a - b));
  expect(told[0]).toBeGreaterThanOrEqual(0);
  expect(told.at(-1)).toBe(1);
  expect(told.filter((progress) => progress === 1).length).toBe(1);
});

test("a millisecond is enough for a profile that says that it is none of here", async () => {
  const engine = await engineWith();
  const profile = await measureProfile(engine, { milliseconds: 1 });
  expectWhole(profile, engine.build);
  if (Object.keys(profile.spread!).length === 0) expect(profile.notes!.join(" ")).toMatch(/Nothing could be measured|experiments/);
});

describe("abort", () => {
  test("before it begins: nothing is measured", async () => {
    const engine = await engineWith();
    let told = 0;
    const running = measureProfile(engine, { signal: AbortSignal.abort("no"), onProgress: () => told++ });
    await expect(running).rejects.toBe("no");
    expect(told).toBe(0);
  });

  test.each([1, 2, 3, 5, 9, 14])("at the rest number %i: the signal's reason, the memory given back, the engine alive", async (k) => {
    const engine = await engineWith();
    const left = memoryLeft(engine);
    const controller = new AbortController();
    const reason = { of: "the caller" };
    const host = hostPacing();
    let rests = 0;
    const yielding = (resume: () => void): void => {
      if (++rests === k) controller.abort(reason);
      host.yield(resume);
    };
    const running = profileBy({ now: host.now, yield: yielding }, engine, { milliseconds: 2000, signal: controller.signal });
    await expect(running).rejects.toBe(reason);
    expect(rests).toBe(k);
    expect(memoryLeft(engine)).toBe(left);
    expectAlive(engine);
  });

  test.each([1, 2, 7])("at the progress number %i", async (k) => {
    const engine = await engineWith();
    const left = memoryLeft(engine);
    const controller = new AbortController();
    let told = 0;
    const onProgress = (): void => void (++told === k && controller.abort());
    await expect(measureProfile(engine, { milliseconds: 2000, signal: controller.signal, onProgress })).rejects.toMatchObject({ name: "AbortError" });
    expect(memoryLeft(engine)).toBe(left);
    expectAlive(engine);
  });

  test("what onProgress throws ends it as well", async () => {
    const engine = await engineWith();
    const left = memoryLeft(engine);
    const failure = new Error("of the caller");
    const onProgress = (): void => {
      throw failure;
    };
    await expect(measureProfile(engine, { milliseconds: short, onProgress })).rejects.toBe(failure);
    expect(memoryLeft(engine)).toBe(left);
    expectAlive(engine);
  });

  test("a crossover: the memory is given back", async () => {
    const engine = await engineWith();
    const left = memoryLeft(engine);
    const controller = new AbortController();
    let told = 0;
    const onProgress = (): void => void (++told === 3 && controller.abort("enough"));
    await expect(measureCrossover(engine, { width: 64, height: 48, signal: controller.signal, onProgress })).rejects.toBe("enough");
    expect(memoryLeft(engine)).toBe(left);
    expectAlive(engine);
  });
});

describe("dispose meanwhile", () => {
  test.each([1, 3, 8])("at the rest number %i: the error says that the engine was disposed", async (k) => {
    const engine = await engineWith();
    const host = hostPacing();
    let rests = 0;
    const yielding = (resume: () => void): void => {
      if (++rests === k) engine.dispose();
      host.yield(resume);
    };
    await expect(profileBy({ now: host.now, yield: yielding }, engine, { milliseconds: 2000 })).rejects.toMatchObject({ code: "disposed" });
  });

  test("and before", async () => {
    const engine = await engineWith();
    engine.dispose();
    await expect(measureProfile(engine)).rejects.toMatchObject({ code: "disposed" });
    await expect(measureCrossover(engine, { width: 64, height: 48 })).rejects.toMatchObject({ code: "disposed" });
  });

  test("during a crossover", async () => {
    const engine = await engineWith();
    const running = measureCrossover(engine, { width: 64, height: 48, onProgress: () => engine.dispose() });
    await expect(running).rejects.toMatchObject({ code: "disposed" });
  });
});

describe("a memory limit", () => {
  test.each([2 ** 18, 2 ** 21])("of %i bytes, smaller than the experiments: what fits is measured, and nothing is lost", async (memoryLimit) => {
    const engine = await engineWith({ memoryLimit });
    const left = memoryLeft(engine);
    const profile = await measureProfile(engine, { milliseconds: 1000 });
    expectWhole(profile, engine.build);
    expect(memoryLeft(engine)).toBe(left);
    expectAlive(engine);
  });

  test("taken up by other filters: what is left is used, and they stay as they are", async () => {
    const engine = await engineWith({ memoryLimit: 2 ** 22 });
    const filter = engine.prepare(gaussian(3), { width: 5, height: 1 });
    const expected = filter.run(image).data.slice();
    const held = engine.prepare(gaussian(3), { width: 300, height: 600, channels: 4, sample: "f32" });
    expectWhole(await measureProfile(engine, { milliseconds: short }), engine.build);
    expect(filter.run(image).data).toEqual(expected);
    held.dispose();
  });

  test("that no method of a crossover meets is an error that says so, and nothing is lost", async () => {
    const engine = await engineWith({ memoryLimit: 2 ** 20 });
    const left = memoryLeft(engine);
    await expect(measureCrossover(engine, { width: 4, height: 2_000_000, channels: 4, sample: "f32" })).rejects.toMatchObject({ code: "memory-limit" });
    expect(memoryLeft(engine)).toBe(left);
  });
});

test("two measurements of one engine at once, and runs between their slices", async () => {
  const engine = await engineWith();
  const left = memoryLeft(engine);
  const both = [measureProfile(engine, { milliseconds: 300 }), measureProfile(engine, { milliseconds: 300 })];
  const crossover = measureCrossover(engine, { width: 64, height: 48, sizes: [3, 9], milliseconds: 300 });
  const filter = engine.prepare(gaussian(1), { width: 5, height: 1 });
  for (let run = 0; run < 20; run++) expect((await filter.runAsync(image)).data[2]).toBe(4);
  filter.dispose();
  for (const profile of await Promise.all(both)) expectWhole(profile, engine.build);
  expect((await crossover).rows.length).toBeGreaterThanOrEqual(0);
  expect(memoryLeft(engine)).toBe(left);
});

describe("wrong arguments are refused before anything is measured", () => {
  const untyped = (value: unknown): never => value as never;

  test.each([
    ["nothing", undefined],
    ["null", null],
    ["a name", "engine"],
    ["an object like an engine", { build: "simd", threads: 1, prepare: () => undefined, explain: () => undefined }],
  ])("%s in place of an engine", async (_, engine) => {
    await expect(measureProfile(untyped(engine))).rejects.toMatchObject({ code: "unknown-value" });
    await expect(measureCrossover(untyped(engine), { width: 5, height: 5 })).rejects.toMatchObject({ code: "unknown-value" });
  });

  test.each<[string, object | null, string]>([
    ["an option that there is not", { millseconds: 5 }, "unknown-option"],
    ["NaN milliseconds", { milliseconds: NaN }, "invalid-number"],
    ["no milliseconds", { milliseconds: 0 }, "invalid-number"],
    ["endless milliseconds", { milliseconds: Infinity }, "invalid-number"],
    ["milliseconds in words", { milliseconds: "100" }, "invalid-number"],
    ["a signal that is none", { signal: {} }, "unknown-value"],
    ["a signal that is null", { signal: null }, "unknown-value"],
    ["progress that is no function", { onProgress: 5 }, "unknown-value"],
  ])("%s", async (_, options, code) => {
    const engine = await engineWith();
    await expect(measureProfile(engine, untyped(options))).rejects.toMatchObject({ code, fault: "caller" });
    await expect(measureCrossover(engine, untyped({ width: 5, height: 5, ...options }))).rejects.toMatchObject({ code, fault: "caller" });
  });

  test.each<[string, unknown]>([
    ["null", null],
    ["a number", 5],
  ])("%s in place of options", async (_, options) => {
    const engine = await engineWith();
    await expect(measureProfile(engine, untyped(options))).rejects.toMatchObject({ name: "ConvolutionError", fault: "caller" });
    await expect(measureCrossover(engine, untyped(options))).rejects.toMatchObject({ name: "ConvolutionError", fault: "caller" });
  });

  test.each<[string, object]>([
    ["no width", { width: undefined }],
    ["a width of 0", { width: 0 }],
    ["half a row", { height: 0.5 }],
    ["five channels", { channels: 5 }],
    ["another sample type", { sample: "f64" }],
    ["no sizes", { sizes: [] }],
    ["an even size", { sizes: [3, 4] }],
    ["a size of −1", { sizes: [-1] }],
    ["a size in words", { sizes: ["3"] }],
    ["one size that is no list", { sizes: 3 }],
    ["a huge size", { sizes: [1025] }],
    ["a border that there is not", { border: "mirror" }],
    ["a word for separable", { separable: "yes" }],
  ])("a crossover with %s", async (_, options) => {
    const engine = await engineWith();
    const running = measureCrossover(engine, untyped({ width: 5, height: 5, ...options }));
    await expect(running).rejects.toMatchObject({ name: "ConvolutionError", fault: "caller" });
  });
});

test("an option is read once: what was checked is what is used", async () => {
  let reads = 0;
  const engine = await engineWith();
  await measureProfile(engine, {
    get milliseconds() {
      return ++reads === 1 ? 60 : ("later" as never);
    },
  });
  expect(reads).toBe(1);
});
