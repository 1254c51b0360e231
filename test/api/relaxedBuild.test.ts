import { describe, expect, test } from "vitest";
import { ConvolutionError, createEngine, kernel } from "../../src/index.js";
import { builds, engines } from "../support/engines.js";

/**
 * 1/3 in single precision is 11184811 · 2⁻²⁵; three times that, 1 + 2⁻²⁵, rounds to 1. Less 1, only a sum that takes the product
 * unrounded keeps 2⁻²⁵ (IEEE 754-2019, §5.4.1, fusedMultiplyAdd).
 */
const third = Math.fround(1 / 3);

describe("the build relaxed-simd", () => {
  test("is never taken unasked", async () => {
    const engine = await createEngine();
    expect(engine.build).not.toBe("relaxed-simd");
    engine.dispose();
  });

  test("is there by name, or the host is said to lack it", async () => {
    const outcome = await createEngine({ build: "relaxed-simd" }).catch((error: unknown) => error);
    if (builds.includes("relaxed-simd")) expect(outcome).toMatchObject({ build: "relaxed-simd" });
    else {
      expect(outcome).toBeInstanceOf(ConvolutionError);
      expect(outcome).toMatchObject({ code: "webassembly-missing", fault: "host", message: expect.stringMatching(/relaxed SIMD.*"simd".*Node 22/) });
    }
  });

  test("rounds a product and a sum once or twice, others twice", () => {
    const image = { data: Float32Array.of(-1, 3), width: 2, height: 1 };
    const taps = kernel([1, third], { origin: { x: 0, y: 0 } });
    for (const build of builds) {
      const [sum] = engines[build].correlate(image, taps, { method: "direct", border: "zero" }).data;
      expect(build === "relaxed-simd" ? [0, 2 ** -25] : [0], build).toContain(sum);
    }
  });

  test("prices plans like the SIMD build and predicts for itself", () => {
    if (!builds.includes("relaxed-simd")) return;
    const layout = { width: 64, height: 48, channels: 1, sample: "f32" } as const;
    const explained = engines["relaxed-simd"].explain(kernel([[1, 2, 1]]), layout);
    expect(explained.build).toBe("relaxed-simd");
    expect(explained.milliseconds).toBe(engines.simd.explain(kernel([[1, 2, 1]]), layout).milliseconds);
  });
});
