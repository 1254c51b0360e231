import { execFileSync } from "node:child_process";
import { join } from "node:path";
import { describe, expect, test } from "vitest";
import type { Worker } from "node:worker_threads";
import { createEngine, gaussian, type Engine, type Method, type Raster } from "../../src/index.js";
import { noiseSamples } from "../support/noise.js";
import { nodeWorker } from "../support/nodeWorkers.js";
import { root } from "../layers/sources.js";
import { eagerProfile } from "./eagerProfile.js";
import { faulty } from "./faultyWorkers.js";

const layout = { width: 480, height: 600, channels: 4, sample: "u8" } as const;
const image: Raster<Uint8Array> = { data: noiseSamples("u8", 480 * 600 * 4, 11) as Uint8Array, ...layout };
const taps = gaussian({ sigma: 2, radius: 5 });
const plain = await createEngine({ build: "simd" });
const methods: Method[] = ["direct", "fft"];

const expected = (method: Method): Buffer => Buffer.from(plain.convolve(image, taps, { method }).data);
const found = ({ data }: Raster): Buffer => Buffer.from(data as Uint8Array);
const engineWith = (threads: number, createWorker: () => Worker | undefined): Promise<Engine> =>
  createEngine({ build: "simd", threads, createWorker, profile: eagerProfile("simd") });

describe.each(Object.entries(faulty))("a worker that %s", (_, createWorker) => {
  test("costs neither the result nor the next one, in run and runAsync", async () => {
    const engine = await engineWith(2, createWorker);
    for (const method of methods) {
      const filter = engine.prepare(taps, layout, { method });
      for (let run = 0; run < 2; run += 1) expect(found(filter.run(image)).equals(expected(method))).toBe(true);
      expect(found(await filter.runAsync(image)).equals(expected(method))).toBe(true);
      filter.dispose();
    }
    engine.dispose();
  });
});

test.each([undefined, {}, { postMessage: () => undefined }, 5])("what is no worker is none: %o", async (given) => {
  const engine = await engineWith(2, () => given as unknown as Worker);
  expect(engine.threads).toBe(1);
  expect(Buffer.from(engine.convolve(image, taps).data)).toEqual(Buffer.from(plain.convolve(image, taps).data));
  engine.dispose();
});

describe("one faulty worker among three threads", () => {
  test.each(["ends with a task", "never takes a task", "throws at load"])("%s: the others do its work", async (name) => {
    let made = 0;
    const engine = await engineWith(3, () => (made++ === 0 ? faulty[name]!() : nodeWorker()));
    for (const method of methods) {
      const filter = engine.prepare(taps, layout, { method });
      for (let run = 0; run < 3; run += 1) expect(found(await filter.runAsync(image)).equals(expected(method))).toBe(true);
      expect(found(filter.run(image)).equals(expected(method))).toBe(true);
    }
    expect(engine.threads).toBe(name === "never takes a task" ? 3 : 2);
    engine.dispose();
  });
});

describe("workers and their ends", () => {
  const large = { width: 1200, height: 900, channels: 4, sample: "u8" } as const;
  const photo: Raster<Uint8Array> = { data: noiseSamples("u8", 1200 * 900 * 4, 3) as Uint8Array, ...large };

  test.each(methods)("terminated while it works: %s", async (method) => {
    const made: Worker[] = [];
    const engine = await engineWith(2, () => {
      made.push(nodeWorker());
      return made.at(-1)!;
    });
    const whole = Buffer.from(plain.convolve(photo, taps, { method }).data);
    const filter = engine.prepare(taps, large, { method });
    expect(filter.explanation.threads).toBe(2);
    const running = filter.runAsync(photo);
    await new Promise((resolve) => setTimeout(resolve, 3));
    await made[0]!.terminate();
    expect(found(await running).equals(whole)).toBe(true);
    expect(engine.threads).toBe(1);
    expect(found(filter.run(photo)).equals(whole)).toBe(true);
    engine.dispose();
  });

  test.each(methods)("aborted runs leave a filter that is right: %s", async (method) => {
    const engine = await engineWith(2, nodeWorker);
    const whole = Buffer.from(plain.convolve(photo, taps, { method }).data);
    const filter = engine.prepare(taps, large, { method });
    for (const wait of [0, 2, 8]) {
      const abort = new AbortController();
      const running = filter.runAsync(photo, { signal: abort.signal });
      setTimeout(() => abort.abort("enough"), wait);
      await running.catch((reason: unknown) => expect(reason).toBe("enough"));
      expect(found(filter.run(photo)).equals(whole)).toBe(true);
    }
    engine.dispose();
  });

  test("dispose ends every worker", async () => {
    const ends: Promise<number>[] = [];
    const engine = await engineWith(4, () => {
      const worker = nodeWorker();
      ends.push(new Promise((resolve) => worker.on("exit", resolve)));
      return worker;
    });
    const filter = engine.prepare(taps, layout, { method: "direct" });
    filter.run(image);
    engine.dispose();
    expect(await Promise.all(ends)).toHaveLength(3);
  });

  test.each(["idle", "disposed"])("a Node process with an engine that is %s ends by itself", (state) => {
    const script = join(root, "test", "threads", "idleProcess.ts");
    const printed = execFileSync(process.execPath, ["--import", "tsx", script, state], { encoding: "utf8", timeout: 60_000 });
    expect(printed.trim()).toBe("2 threads");
  });
});
