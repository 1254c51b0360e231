import { expect, test } from "vitest";
import { kernelsOfEveryKind } from "../support/kernels.js";
import { largestDifference, ways } from "../support/methods.js";
import type { Question } from "../support/questions.js";

test.each(kernelsOfEveryKind)("a single one spreads into the taps: %s", (_, kernel) => {
  const question: Question = { image: { data: Float32Array.of(1), width: 1, height: 1, channels: 1 }, kernel, options: { border: "zero", extent: "full" } };
  for (const way of ways(question)) {
    expect(largestDifference(way.answer(question), kernel.taps), `${way.build} ${way.method}`).toBeLessThanOrEqual(way.errorBound);
  }
});

test.each(kernelsOfEveryKind)("correlated, a single one spreads into the taps turned by 180°: %s", (_, kernel) => {
  const question: Question = {
    image: { data: Float32Array.of(1), width: 1, height: 1, channels: 1 },
    kernel,
    options: { border: "zero", extent: "full" },
    correlate: true,
  };
  for (const way of ways(question)) {
    expect(largestDifference(way.answer(question), kernel.taps.toReversed()), `${way.build} ${way.method}`).toBeLessThanOrEqual(way.errorBound);
  }
});
