import { expect, test } from "vitest";
import { engines } from "../support/engines.js";
import { noiseKernel } from "../support/kernels.js";
import { firstDifference } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import { layoutOf } from "../support/questions.js";

/** A call of two rows of 900 pixels under 161 × 160 taps would last 23 ms at 8 multiply–adds a nanosecond; panels bring it below half of that. */
test("where two rows are too long for one call, narrower panels give the same bytes", () => {
  const image = noiseImage("f32", 900, 5, 4, 3);
  const kernel = noiseKernel(161, 160, 4);
  const alone = engines.simd.explain(kernel, { ...layoutOf(image), width: 400 }, { method: "direct", alpha: "none" });
  const cut = engines.simd.explain(kernel, layoutOf(image), { method: "direct", alpha: "none" });
  expect(cut.bytes).toBeLessThan(1.3 * alone.bytes);
  const whole = engines.simd.convolve(image, kernel, { method: "direct", alpha: "none" }).data;
  for (const x of [0, 300, 600]) {
    const region = { x, y: 0, width: 300, height: 5 };
    const part = engines.simd.convolve(image, kernel, { method: "direct", alpha: "none", region }).data;
    const rows = Array.from({ length: 5 }, (_, r) => Array.from(whole.subarray((r * 900 + x) * 4, (r * 900 + x + 300) * 4)));
    expect(firstDifference(part, rows.flat())).toBeUndefined();
  }
});
