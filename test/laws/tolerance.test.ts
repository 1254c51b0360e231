import { describe, expect, test } from "vitest";
import type { ConvolveOptions, SampleType } from "../../src/index.js";
import { kernel, outer } from "../../src/kernels/index.js";
import { applicable } from "../support/answers.js";
import { builds } from "../support/engines.js";
import { noise, noiseImage } from "../support/noise.js";
import { judge } from "../reference/agreement.js";
import { ways } from "../support/methods.js";
import type { Question } from "../support/questions.js";

/** An outer product with a little noise on it: nearly one term, exactly many. */
const next = noise(3);
const nearlySeparable = (() => {
  const smooth = outer([1, 4, 6, 4, 1], [1, 6, 15, 20, 15, 6, 1]);
  const taps = smooth.taps.map((tap) => (tap + 0.2 * (next() - 0.5)) / 1024);
  return kernel(Array.from({ length: 5 }, (_, j) => Array.from(taps.subarray(7 * j, 7 * j + 7))));
})();

const ask = (sample: SampleType, tolerance: number | undefined): Question => {
  const options: ConvolveOptions = tolerance === undefined ? {} : { tolerance };
  return { image: noiseImage(sample, 40, 21, 1, 6), kernel: nearlySeparable, options };
};

describe.each(builds)("%s", (build) => {
  test("a larger tolerance lets fewer terms stand for a kernel, and adds no more than itself to the bound", () => {
    let terms = Infinity;
    const none = new Map(applicable(build, ask("u8", 0)).map(({ method, errorBound }) => [method, errorBound]));
    for (const tolerance of [0, 1 / 16, 0.25, 1, 4]) {
      for (const { method, errorBound, terms: summed } of applicable(build, ask("u8", tolerance))) {
        const without = none.get(method);
        if (without !== undefined) expect(errorBound, `${method} at ${tolerance}`).toBeLessThanOrEqual(without + tolerance);
        if (method !== "separable") continue;
        expect(summed).toBeLessThanOrEqual(terms);
        terms = summed;
      }
    }
    expect(terms).toBe(1);
  });

  test("the default is a sixteenth of a level for 8-bit results, nothing for others", () => {
    for (const [sample, standard] of [
      ["u8", 1 / 16],
      ["u16", 0],
      ["f32", 0],
    ] as const) {
      expect(applicable(build, ask(sample, undefined)), sample).toEqual(applicable(build, ask(sample, standard)));
    }
  });
});

test("results stay within the bound at every tolerance", () => {
  for (const tolerance of [0, 0.25, 1, 4]) {
    for (const sample of ["u8", "f32"] as const) {
      const question = ask(sample, tolerance);
      const { defined, disagreement } = judge(question.image, question.kernel, question.options);
      for (const way of ways(question)) {
        expect(disagreement({ ...defined, data: way.answer(question) }, way.errorBound), `${way.build} ${way.method} ${tolerance}`).toBeUndefined();
      }
    }
  }
});

test("bytes of unit-gain kernels are never more than a level from correct rounding: every bound is below one half", () => {
  for (const build of builds) {
    for (const { method, errorBound } of applicable(build, ask("u8", undefined))) expect(errorBound, method).toBeLessThan(0.5);
  }
});
