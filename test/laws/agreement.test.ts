import { describe, expect, test } from "vitest";
import type { ConvolveOptions, SampleType } from "../../src/index.js";
import { kernelsOfEveryKind } from "../support/kernels.js";
import { firstDifference, largestDifference, ways } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import type { Question } from "../support/questions.js";

const samples: SampleType[] = ["u8", "u16", "f32"];

describe.each(samples)("%s", (sample) => {
  test.each(kernelsOfEveryKind)("any two methods agree within the sum of their bounds: %s", (_, kernel) => {
    for (const channels of [1, 3] as const) {
      const question: Question = { image: noiseImage(sample, 41, 27, channels, 3), kernel, options: { output: { sample: "f32" } } };
      const answered = ways(question).map((way) => ({ ...way, data: way.answer(question) }));
      for (const one of answered) {
        for (const other of answered) {
          const name = `${one.build} ${one.method} against ${other.build} ${other.method}`;
          expect(largestDifference(one.data, other.data), name).toBeLessThanOrEqual(one.errorBound + other.errorBound);
        }
      }
    }
  });

  test.each(kernelsOfEveryKind)("the builds give the same samples by the same method: %s", (_, kernel) => {
    const variants: ConvolveOptions[] = [
      {},
      { border: "periodic", extent: "full" },
      { light: "linear" },
      { alpha: "premultiplied" },
      { alpha: "none", output: { sample: "f32" } },
    ];
    for (const options of variants) {
      const question: Question = { image: noiseImage(sample, 37, 22, 4, 8), kernel, options };
      const all = ways(question);
      for (const simd of all.filter(({ build }) => build === "simd")) {
        const scalar = all.find(({ build, method }) => build === "scalar" && method === simd.method);
        expect(firstDifference(scalar!.answer(question), simd.answer(question)), simd.method).toBeUndefined();
        expect(scalar?.errorBound, simd.method).toBe(simd.errorBound);
      }
    }
  });
});
