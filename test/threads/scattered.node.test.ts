import { afterAll, describe, expect, test } from "vitest";
import { code } from "../../src/generated/simd.js";
import { box, createEngine, gaussian, kernel, type Kernel, type Method, type Raster } from "../../src/index.js";
import { noiseSamples } from "../support/noise.js";
import { nodeWorker } from "../support/nodeWorkers.js";
import { eagerProfile } from "./eagerProfile.js";
import { faulty } from "./faultyWorkers.js";

/** A module that is given takes no shared memory: bands go to memories of their own, as on pages that are not cross-origin isolated. */
const module = await WebAssembly.compile(Uint8Array.from(Buffer.from(code, "hex")));
const profile = eagerProfile("simd");
const one = await createEngine({ build: "simd" });
const three = await createEngine({ build: "simd", module, profile, threads: 3, createWorker: nodeWorker });
afterAll(() => three.dispose());

const size = { width: 130, height: 301 } as const;
const imageOf = (sample: "u8" | "f32", channels: 1 | 3 | 4): Raster => ({ data: noiseSamples(sample, 130 * 301 * channels, channels), ...size, channels });
const bytesOf = ({ data }: Raster): Buffer => Buffer.from(data.buffer, data.byteOffset, data.byteLength);
const kernels: [Method, Kernel][] = [
  [
    "direct",
    kernel(
      [
        [1, 2, 3],
        [4, 5, 7],
        [1, 0, 1],
      ].map((row) => row.map((tap) => tap / 24)),
    ),
  ],
  ["separable", gaussian({ sigma: 2 })],
  ["running-sum", box(7)],
];

describe.each(kernels)("%s: bands in memories of their own", (method, taps) => {
  test.each(["replicate", "periodic", "zero", "renormalised"] as const)("give the bytes of one thread: border %s", async (border) => {
    for (const image of [imageOf("u8", 4), imageOf("f32", 3)]) {
      const options = { method, border };
      const filter = three.prepare(taps, { ...size, channels: image.channels!, sample: image.data instanceof Float32Array ? "f32" : "u8" }, options);
      expect(filter.explanation.threads).toBe(3);
      const expected = bytesOf(one.convolve(image, taps, options));
      const progress: number[] = [];
      for (let run = 0; run < 2; run += 1) {
        expect(bytesOf(await filter.runAsync(image, { onProgress: (part) => progress.push(part) })).equals(expected)).toBe(true);
        expect(progress.at(-1)).toBe(1);
        expect(bytesOf(filter.run(image)).equals(expected)).toBe(true);
      }
      filter.dispose();
    }
  });

  test("two filters and an abort at a time", async () => {
    const image = imageOf("u8", 4);
    const expected = bytesOf(one.convolve(image, taps, { method }));
    const filters = [0, 1].map(() => three.prepare(taps, { ...size, channels: 4 }, { method }));
    const abort = new AbortController();
    const jobs = [filters[0]!.runAsync(image, { signal: abort.signal }), filters[1]!.runAsync(image)];
    setTimeout(() => abort.abort("enough"), 1);
    const [first, second] = await Promise.allSettled(jobs);
    if (first!.status === "rejected") expect(first!.reason).toBe("enough");
    expect(second!.status === "fulfilled" && bytesOf(second!.value).equals(expected)).toBe(true);
    expect(bytesOf(await filters[0]!.runAsync(image)).equals(expected)).toBe(true);
    for (const filter of filters) filter.dispose();
  });
});

test("transforms stay on one thread", () => {
  expect(three.explain(kernels[0]![1], { ...size, channels: 4 }, { method: "fft" }).threads).toBe(1);
});

test.each(["throws at load", "never answers", "ends with a task"])("a worker that %s costs no result", async (name) => {
  const engine = await createEngine({ build: "simd", module, profile, threads: 2, createWorker: faulty[name]! });
  const [method, taps] = kernels[1]!;
  const image = imageOf("u8", 4);
  const filter = engine.prepare(taps, { ...size, channels: 4 }, { method });
  expect(bytesOf(await filter.runAsync(image)).equals(bytesOf(one.convolve(image, taps, { method })))).toBe(true);
  engine.dispose();
});
