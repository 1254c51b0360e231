import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { agreementsOf } from "../../bench/demo/agreement.js";
import { threeJobs } from "../../bench/demo/jobs.js";
import { perform, regretOf, verdictOf, type Outcome } from "../../bench/demo/measure.js";
import { drawSheet } from "../../bench/demo/sheet/sheet.js";
import { createEngine, type Engine } from "../../src/index.js";

describe("a job of the demo", () => {
  const image = drawSheet(160);
  const layout = { width: image.width, height: image.height, channels: 3, sample: "u8" } as const;
  let engine: Engine;
  let outcome: Outcome;
  beforeAll(async () => {
    engine = await createEngine();
    outcome = perform(engine, threeJobs()[0], image, layout);
  }, 60_000);
  afterAll(() => engine.dispose());

  it("times every method that applies and none that is refused", () => {
    for (const { candidate, timing } of outcome.methods) expect(timing === undefined, candidate.method).toBe(candidate.refused !== undefined);
    expect(outcome.methods.some(({ timing }) => timing !== undefined)).toBe(true);
  });

  it("keeps the median between the shortest and the longest run, over at least three", () => {
    for (const { timing } of outcome.methods) {
      if (timing === undefined) continue;
      expect(timing.runs).toBeGreaterThanOrEqual(3);
      expect(timing.shortest).toBeLessThanOrEqual(timing.median);
      expect(timing.median).toBeLessThanOrEqual(timing.longest);
    }
  });

  it("gives the same bytes as the plain call", () => {
    const { kernel, options } = threeJobs()[0];
    expect(
      Buffer.compare(outcome.result.data as Uint8Array, engine.convolve(image, kernel, { ...options, method: outcome.explanation.method }).data as Uint8Array),
    ).toBe(0);
  });

  it("finds that its methods agree", () => {
    const agreements = agreementsOf(engine, outcome, image);
    expect(agreements.length).toBeGreaterThan(0);
    for (const agreement of agreements) expect(agreement, agreement.methods.join(" – ")).toMatchObject({ holds: true });
  });

  it("finds one sample that is two levels off", () => {
    const [first, ...others] = outcome.results;
    const data = first.raster.data.slice();
    data[1234] = data[1234] > 127 ? data[1234] - 3 : data[1234] + 3;
    const changed = { ...outcome, results: [{ ...first, raster: { ...first.raster, data } }, ...others] };
    const broken = agreementsOf(engine, changed, image).filter(({ holds }) => !holds);
    expect(broken).toHaveLength(others.length);
  });

  it("tells what a choice cost", () => {
    const timed = (method: "direct" | "fft", median: number): Outcome["methods"][number] => ({
      candidate: { method },
      timing: { method, median, shortest: median, longest: median, runs: 3 },
    });
    const made = (direct: number, fft: number): Outcome => ({
      ...outcome,
      explanation: { ...outcome.explanation, method: "direct" },
      methods: [timed("direct", direct), timed("fft", fft)],
    });
    expect(regretOf(made(12, 10))).toBeCloseTo(0.2, 12);
    expect(verdictOf(made(12, 10))).toBe("20 % slower than the fastest");
    expect(verdictOf(made(10, 12))).toBe("the fastest of those that apply");
    expect(verdictOf(made(10.05, 10))).toBe("within 1 % of the fastest");
  });
});

describe("methods on an image with alpha", () => {
  it("agree where alpha runs from nothing to opaque, and a wrong alpha is found", async () => {
    const [width, height] = [96, 64];
    const data = Uint16Array.from({ length: width * height * 4 }, (_, index) =>
      index % 4 === 3 ? (((index >> 2) % width) * 65535) / (width - 1) : (index * 7919) % 65536,
    );
    const image = { data, width, height, channels: 4 } as const;
    const engine = await createEngine();
    const outcome = perform(engine, threeJobs()[1], image, { width, height, channels: 4, sample: "u16" });
    const agreements = agreementsOf(engine, outcome, image);
    expect(agreements.length).toBeGreaterThan(0);
    for (const agreement of agreements) expect(agreement, agreement.methods.join(" – ")).toMatchObject({ holds: true, premultiplied: true });
    const [first, ...others] = outcome.results;
    const changed = first.raster.data.slice();
    changed[4 * 50 + 3] -= 64;
    const broken = agreementsOf(engine, { ...outcome, results: [{ ...first, raster: { ...first.raster, data: changed } }, ...others] }, image);
    expect(broken.filter(({ holds }) => !holds)).toHaveLength(others.length);
    engine.dispose();
  });
});
