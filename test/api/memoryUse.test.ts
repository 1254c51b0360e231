import { expect, test } from "vitest";
import { box, createEngine, gaussian, type Channels, type Engine, type Filter, type Method, type SampleType } from "../../src/index.js";
import { fc, posed, problems } from "../reference/problems.js";
import { noiseKernel } from "../support/kernels.js";
import { noise } from "../support/noise.js";
import { layoutOf } from "../support/questions.js";

const pageBytes = 65536;

/** Bytes of an engine's memory, by a view of it. */
function memoryBytes(probe: Filter): number {
  return probe.source.data.buffer.byteLength;
}

async function probed(memoryLimit?: number): Promise<{ engine: Engine; probe: Filter }> {
  const engine = await createEngine(memoryLimit === undefined ? {} : { memoryLimit });
  const probe = engine.prepare(box(1), { width: 4, height: 4 }) as unknown as Filter;
  void probe.source;
  return { engine, probe };
}

/** A copy of a filter takes what the first one took: eight in a row make the memory grow by just that. */
test("explain tells the bytes that are used, within a page, on 200 random problems", async () => {
  let tried = 0;
  await fc.assert(
    fc.asyncProperty(problems, async (problem) => {
      const { image, kernel, options = {}, correlate = false } = posed(problem);
      const layout = layoutOf(image);
      const asked = { ...options, correlate };
      const { engine, probe } = await probed();
      const { bytes } = engine.explain(kernel, layout, asked);
      // What the known-answer test has left is filled first.
      const start = memoryBytes(probe);
      while (memoryBytes(probe) === start) engine.prepare(kernel, layout, asked);
      const before = memoryBytes(probe);
      for (let copies = 0; copies < 8; copies++) engine.prepare(kernel, layout, asked);
      expect(Math.abs(memoryBytes(probe) - before - 8 * bytes)).toBeLessThanOrEqual(pageBytes);
      engine.dispose();
      tried++;
    }),
    { numRuns: 200 },
  );
  expect(tried).toBe(200);
});

/** The first four are as large as they get, the next of every kind: what comes later fits in what these leave. */
test("ten thousand filters of mixed sizes, four at a time, do not grow the memory after the first hundred", async () => {
  const { engine, probe } = await probed();
  const next = noise(5);
  const pick = <T>(values: readonly T[], index: number): T => values[index % values.length]!;
  const kernels: [Method, ReturnType<typeof box>][] = [
    ["direct", noiseKernel(3, 3, 1)],
    ["separable", gaussian({ sigma: 2, radius: 4 })],
    ["running-sum", box(9)],
    ["direct", noiseKernel(7, 5, 2)],
    ["fft", noiseKernel(9, 9, 3)],
  ];
  const samples: SampleType[] = ["u8", "u16", "f32"];
  const alive: { dispose(): void }[] = [];
  let after = 0;
  for (let cycle = 0; cycle < 10_000; cycle++) {
    if (cycle === 100) after = memoryBytes(probe);
    const kind = cycle < 4 ? 14 : cycle < 60 ? cycle : Math.floor(next() * 60);
    const [method, kernel] = pick(kernels, kind);
    const side = cycle < 60 ? 64 : 1 + Math.floor(next() * 64);
    const layout = { width: side, height: side, channels: pick<Channels>([4, 3, 2, 1], kind >> 4), sample: pick(samples, kind) };
    const filter = engine.prepare(kernel, layout, { method });
    alive.push(filter);
    if (kind % 7 === 0) void filter.result;
    if (alive.length === 4) alive.splice(Math.floor(next() * 4), 1)[0]!.dispose();
  }
  expect(memoryBytes(probe)).toBe(after);
  engine.dispose();
});

test("48 megapixels of RGBA bytes under 101 × 101 taps take at most 64 MiB, by every method that applies", async () => {
  const { engine } = await probed();
  const layout = { width: 8000, height: 6000, channels: 4, sample: "u8" } as const;
  const chosen = engine.explain(noiseKernel(101, 101, 6), layout);
  expect(chosen.method).toBe("fft");
  for (const kernel of [noiseKernel(101, 101, 6), gaussian({ sigma: 17, radius: 50 }), box(101)]) {
    for (const { bytes, refused } of engine.explain(kernel, layout).candidates) if (refused === undefined) expect(bytes).toBeLessThanOrEqual(64 * 1048576);
  }
  engine.dispose();
});

test("with less and less memory a filter takes less, until it is refused with what it needs at least; and then it takes exactly that", async () => {
  const kernel = noiseKernel(41, 41, 6);
  const layout = { width: 1600, height: 900, channels: 4, sample: "u8" } as const;
  for (const method of ["direct", "fft"] as const) {
    let before = Infinity;
    let least = 0;
    for (let limit = 64 * 1048576; least === 0; limit = Math.floor(limit / 2)) {
      const { engine } = await probed(limit);
      try {
        const { bytes } = engine.prepare(kernel, layout, { method }).explanation;
        expect(bytes).toBeLessThanOrEqual(Math.min(limit, before));
        before = bytes;
      } catch (error) {
        expect(error).toMatchObject({ code: "memory-limit", fault: "capacity" });
        least = (error as { received: number }).received;
        expect(least).toBeGreaterThan(limit / 2);
      }
      engine.dispose();
    }
  }
});
