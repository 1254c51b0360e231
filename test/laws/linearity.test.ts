import { describe, expect, test } from "vitest";
import type { Border } from "../../src/index.js";
import { kernelsOfEveryKind } from "../support/kernels.js";
import { largestDifference, ways } from "../support/methods.js";
import { noise } from "../support/noise.js";
import type { Question } from "../support/questions.js";

const linearBorders: Border[] = ["replicate", "zero", "periodic", "half-sample-symmetric", "whole-sample-symmetric", { rows: "zero", columns: "periodic" }];
const width = 23;
const height = 17;

/** Samples of twelve bits, so that halves and quarters of them, and the sum of these, are exact in single precision. */
function twelveBits(seed: number): Float32Array {
  const next = noise(seed);
  for (let warm = 0; warm < 8; warm++) next();
  return Float32Array.from({ length: width * height }, () => Math.floor(4096 * next()) / 4096);
}

const image = (data: Float32Array): Question["image"] => ({ data, width, height, channels: 1 });

/** T(a x + b z) = a T(x) + b T(z), within what the three runs may be off. */
describe.each(linearBorders.map((border) => [JSON.stringify(border), border] as const))("linear with border %s", (_, border) => {
  test.each(kernelsOfEveryKind)("%s", (__, kernel) => {
    const [a, b] = [0.5, -0.25];
    const x = twelveBits(1);
    const z = twelveBits(2);
    const mixture = x.map((value, index) => a * value + b * z[index]!);
    const ask = (data: Float32Array): Question => ({ image: image(data), kernel, options: { border } });
    for (const way of ways(ask(x))) {
      const ofMixture = way.answer(ask(mixture));
      const [ofX, ofZ] = [way.answer(ask(x)), way.answer(ask(z))];
      const mixed = Float64Array.from(ofX, (value, index) => a * value + b * ofZ[index]!);
      expect(largestDifference(ofMixture, mixed), `${way.build} ${way.method}`).toBeLessThanOrEqual(way.errorBound * (1 + Math.abs(a) + Math.abs(b)));
    }
  });
});
