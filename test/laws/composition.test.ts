import { describe, expect, test } from "vitest";
import type { Border, Raster } from "../../src/index.js";
import { kernel, outer, reversed } from "../../src/kernels/index.js";
import { noiseKernel, kernelsOfEveryKind } from "../support/kernels.js";
import { absoluteSum, firstDifference, promiseOf, largestDifference, ways, type Way } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import type { Question } from "../support/questions.js";

const image = noiseImage("f32", 25, 18, 1, 9);

/** Two filters one after the other, and what the pair may be off: the second enlarges the first one's error by Σ|h|. */
function twice(way: Way, first: Question["kernel"], second: Question["kernel"], options: Question["options"]) {
  const firstQuestion: Question = { image, kernel: first, options: options! };
  const between = { ...image, data: way.answer(firstQuestion) } as Raster;
  const secondQuestion: Question = { image: between, kernel: second, options: options! };
  const magnitude = Math.max(1, absoluteSum(first.taps));
  const bound = promiseOf(way, firstQuestion).errorBound * absoluteSum(second.taps) + promiseOf(way, secondQuestion).errorBound * magnitude;
  return { data: way.answer(secondQuestion), bound };
}

test("two kernels commute with the periodic border", () => {
  const [first, second] = [noiseKernel(5, 3, 11), noiseKernel(2, 6, 12)];
  for (const way of ways({ image, kernel: first, options: { border: "periodic" } })) {
    if (way.method === "separable") continue;
    const oneWay = twice(way, first, second, { border: "periodic" });
    const otherWay = twice(way, second, first, { border: "periodic" });
    expect(largestDifference(oneWay.data, otherWay.data), `${way.build} ${way.method}`).toBeLessThanOrEqual(oneWay.bound + otherWay.bound);
  }
});

const separableBorders: Border[] = ["replicate", "zero", "periodic", "half-sample-symmetric", "whole-sample-symmetric", { rows: "replicate", columns: "zero" }];
describe.each(separableBorders.map((border) => [JSON.stringify(border), border] as const))(
  "an outer product is its column, then its row: border %s",
  (_, border) => {
    test("every method", () => {
      const [columnTaps, rowTaps] = [
        [1, -0.5, 2, 0.25, 1],
        [0.5, 1, -1, 0.75],
      ];
      const product = outer(columnTaps, rowTaps);
      const question: Question = { image, kernel: product, options: { border } };
      for (const way of ways(question)) {
        const passes = twice(way, kernel(columnTaps.map((tap) => [tap])), kernel([rowTaps]), { border });
        expect(largestDifference(way.answer(question), passes.data), `${way.build} ${way.method}`).toBeLessThanOrEqual(way.errorBound + passes.bound);
      }
    });
  },
);

test.each(kernelsOfEveryKind)("correlation is convolution with the kernel turned by 180°: %s", (_, taps) => {
  for (const border of ["replicate", "zero", "whole-sample-symmetric"] as const) {
    const correlated: Question = { image, kernel: taps, options: { border }, correlate: true };
    const convolved: Question = { image, kernel: reversed(taps), options: { border } };
    for (const way of ways(correlated)) {
      expect(firstDifference(way.answer(correlated), way.answer(convolved)), `${way.build} ${way.method}`).toBeUndefined();
    }
  }
});
