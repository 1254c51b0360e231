import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { crossingSentence } from "../../bench/demo/crossing.js";
import { threeJobs } from "../../bench/demo/jobs.js";
import { sheetHeight, sheetWidth } from "../../bench/demo/sheet/sheet.js";
import { createEngine, type Engine } from "../../src/index.js";

const layout = { width: sheetWidth, height: sheetHeight, channels: 3, sample: "u8" } as const;

describe("the three jobs", () => {
  let engine: Engine;
  beforeAll(async () => {
    engine = await createEngine({ build: "simd" });
  });
  afterAll(() => engine.dispose());

  it("never tell the engine which method to take", () => {
    for (const { options } of threeJobs()) expect(options.method).toBeUndefined();
  });

  it.each(threeJobs().map((job) => [job.title, job] as const))("%s: by the shipped profile the method is the one the job is made for", (_title, job) => {
    const explanation = engine.explain(job.kernel, layout, job.options);
    expect(explanation.method, String(explanation)).toBe(job.madeFor);
  });

  it("keep flat paper flat: the taps of each sum to 1", () => {
    for (const { kernel, title } of threeJobs()) expect(Math.abs(kernel.sum - 1), title).toBeLessThan(1e-12);
  });

  it("tell where a wider Gaussian goes to another method", () => {
    const family = threeJobs()[1].family!;
    const sentence = crossingSentence(engine, family, layout);
    const widest = engine.explain(family.kernelOf(12), layout).method;
    expect(sentence).toContain(`${widest} from σ = `);
    expect(sentence).toContain("up to the widest asked for, σ = 12.");
  });
});
