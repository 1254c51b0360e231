import { describe, expect, test } from "vitest";
import type { ConvolveOptions, Extent, Region, Samples } from "../../src/index.js";
import { gaussian, kernel } from "../../src/kernels/index.js";
import { kernelsOfEveryKind, noiseKernel } from "../support/kernels.js";
import { firstDifference, largestDifference, ways } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import type { Question } from "../support/questions.js";

/** The rectangle of a whole result. */
function cropped(whole: Samples, width: number, channels: number, region: Region): number[] {
  const rows = Array.from({ length: region.height }, (_, y) =>
    whole.subarray(((region.y + y) * width + region.x) * channels, ((region.y + y) * width + region.x + region.width) * channels),
  );
  return rows.flatMap((row) => Array.from(row));
}

const extents: [extent: Extent, width: number, height: number][] = [
  ["same", 45, 33],
  ["full", 45, 33],
];
const regions: Region[] = [
  { x: 0, y: 0, width: 1, height: 1 },
  { x: 3, y: 5, width: 17, height: 11 },
  { x: 40, y: 0, width: 5, height: 33 },
  { x: 0, y: 32, width: 45, height: 1 },
];

describe.each(extents)("extent %s", (extent, width, height) => {
  test.each(kernelsOfEveryKind)("a region is what a crop of the whole would be: %s", (_, kernel) => {
    for (const [sample, channels] of [
      ["u8", 4],
      ["f32", 1],
      ["u16", 3],
    ] as const) {
      const options: ConvolveOptions = { extent, border: "half-sample-symmetric" };
      const question: Question = { image: noiseImage(sample, width, height, channels, 4), kernel, options };
      const resultWidth = extent === "full" ? width + kernel.width - 1 : width;
      for (const way of ways(question)) {
        const whole = way.answer(question);
        for (const region of regions) {
          const part = way.answer({ ...question, options: { ...options, region } });
          const crop = cropped(whole, resultWidth, channels, region);
          const name = `${way.build} ${way.method} ${sample} ${JSON.stringify(region)}`;
          if (way.method !== "fft") expect(firstDifference(part, crop), name).toBeUndefined();
          else if (channels !== 4) expect(largestDifference(part, crop), name).toBeLessThanOrEqual(2 * way.errorBound + (sample === "f32" ? 0 : 1));
        }
      }
    }
  });
});

test.each([0.01, 0.1, 1, 4])("a region leaves out as many separable terms as the whole where the border is renormalised: tolerance %d", (tolerance) => {
  const image = noiseImage("f32", 20, 34, 1, 4);
  const options: ConvolveOptions = { extent: "full", border: "renormalised", tolerance: tolerance / 255 };
  const uneven = noiseKernel(4, 6, 3);
  const region: Region = { x: 8, y: 12, width: 8, height: 20 };
  for (const unevenness of [1e-4, 1e-3, 1e-2, 0.1]) {
    const smooth = gaussian({ sigma: { x: 1, y: 2 }, radius: { x: 2, y: 3 } }).taps;
    const taps = kernel(
      Array.from({ length: 6 }, (_, j) => Array.from({ length: 4 }, (__, i) => smooth[j * 5 + i]! * (1 + unevenness * uneven.taps[j * 4 + i]!))),
    );
    const question: Question = { image, kernel: taps, options };
    for (const way of ways(question)) {
      if (way.method !== "separable") continue;
      const crop = cropped(way.answer(question), 23, 1, region);
      expect(firstDifference(way.answer({ ...question, options: { ...options, region } }), crop), `${way.build} ${unevenness}`).toBeUndefined();
    }
  }
});
