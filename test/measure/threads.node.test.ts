import { afterEach, expect, test } from "vitest";
import { createEngine, gaussian, type Engine, type EngineOptions } from "../../src/index.js";
import { measureCrossover, measureProfile } from "../../src/measure/index.js";
import { operationNames } from "../../src/planning/cost.js";
import { nodeWorker } from "../support/nodeWorkers.js";

const image = { data: Uint8Array.of(0, 0, 9, 0, 0), width: 5, height: 1 };
const engines: Engine[] = [];

async function engineOfTwo(options: EngineOptions = {}): Promise<Engine> {
  const engine = await createEngine({ threads: 2, createWorker: nodeWorker, ...options });
  expect(engine.threads).toBe(2);
  engines.push(engine);
  return engine;
}
afterEach(() => {
  for (const engine of engines.splice(0)) engine.dispose();
});

test.each(["simd", "scalar"] as const)("a profile of two threads of the %s build is whole, and its engine takes it without a note", async (build) => {
  const engine = await engineOfTwo({ build });
  const profile = await measureProfile(engine, { milliseconds: 1500 });
  expect(profile).toMatchObject({ version: 2, build, threads: 2 });
  expect(Object.keys(profile.nanoseconds)).toEqual(operationNames);
  for (const price of Object.values(profile.nanoseconds)) expect(Number.isFinite(price) && price >= 0).toBe(true);
  const fitted = await engineOfTwo({ build, profile: JSON.parse(JSON.stringify(profile)) });
  expect(fitted.profile).toEqual(profile);
  expect(engine.convolve(image, gaussian(1)).data).toEqual(fitted.convolve(image, gaussian(1)).data);
});

test("used by one thread it has a note, and so has a profile of one thread that two use", async () => {
  const two = await measureProfile(await engineOfTwo(), { milliseconds: 300 });
  const one = await createEngine({ profile: two });
  engines.push(one);
  expect(one.profile.notes!.join(" ")).toMatch(/Measured with 2 threads, used with 1 thread/);
  const widened = await engineOfTwo({ profile: await measureProfile(one, { milliseconds: 200 }) });
  expect(widened.profile.notes!.join(" ")).toMatch(/Measured with 1 thread, used with 2 threads/);
  expect(widened.profile.threads).toBe(1);
});

test.each([1, 4])("aborted at the progress number %i: the threads work on", async (k) => {
  const engine = await engineOfTwo();
  const controller = new AbortController();
  let told = 0;
  const onProgress = (): void => void (++told === k && controller.abort("enough"));
  await expect(measureProfile(engine, { milliseconds: 2000, signal: controller.signal, onProgress })).rejects.toBe("enough");
  expect(engine.threads).toBe(2);
  const filter = engine.prepare(gaussian(3), { width: 600, height: 500 });
  expect((await filter.runAsync({ data: new Uint8Array(300_000).fill(7), width: 600, height: 500 })).data.every((value) => value === 7)).toBe(true);
});

test("an engine that is disposed meanwhile says so", async () => {
  const engine = await engineOfTwo();
  const running = measureProfile(engine, { milliseconds: 2000, onProgress: (progress) => progress > 0.3 && engine.dispose() });
  await expect(running).rejects.toMatchObject({ code: "disposed" });
});

test("a crossover of two threads", async () => {
  const engine = await engineOfTwo();
  const { rows, threads } = await measureCrossover(engine, { width: 512, height: 384, sizes: [3, 9, 31], milliseconds: 1500 });
  expect(threads).toBe(2);
  expect(rows.length).toBeGreaterThan(0);
  for (const { milliseconds } of rows) for (const one of Object.values(milliseconds)) expect(one).toBeGreaterThan(0);
});
