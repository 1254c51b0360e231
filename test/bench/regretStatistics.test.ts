import { describe, expect, test } from "vitest";
import type { HardwareProfile, Method } from "../../src/index.js";
import { candidateAt } from "../../bench/regret/candidates.js";
import { judgeRuns, missed } from "../../bench/regret/judge.js";
import { choiceOf, planningProblem, predictedRun } from "../../bench/regret/planned.js";
import { recordOf, type ProblemRecord } from "../../bench/regret/records.js";
import { contributions, reasonOf } from "../../bench/regret/reasons.js";
import { agreementOf, bestOf, hasLost, regretOf, summaryOf, withinNoise, type MethodTook } from "../../bench/regret/statistics.js";
import { spreadOf } from "../../bench/spread.js";
import { shippedProfiles } from "../../src/planning/profile.js";

/** Twenty-five times between median − range and median + range, evenly. */
const timed = (method: Method, median: number, range = 0.01): MethodTook => ({
  method,
  milliseconds: spreadOf(Array.from({ length: 25 }, (_, k) => median + range * (k / 12 - 1))),
});
const stopped = (method: Method, atLeast: number): MethodTook => ({ method, atLeast });

describe("regret", () => {
  test("is the time of the choice over that of the best, less 1", () => {
    const [direct, fft] = [timed("direct", 12), timed("fft", 10)];
    expect(regretOf(direct, [direct, fft])).toBeCloseTo(0.2, 12);
    expect(regretOf(fft, [direct, fft])).toBe(0);
  });

  test("is 0 where medians are nearer than their intervals, and only there", () => {
    // Half the width of an interval: 1.57 · (p75 − p25) ÷ √25, and p75 − p25 is the range.
    const [direct, near, far] = [timed("direct", 10, 1), timed("fft", 10.6, 1), timed("fft", 10.7, 1)];
    expect([withinNoise(direct, near), withinNoise(direct, far)]).toEqual([true, false]);
    expect(regretOf(near, [direct, near])).toBe(0);
    expect(regretOf(far, [direct, far])).toBeCloseTo(0.07, 12);
  });

  test("of a choice that was stopped is what it had taken by then; one that was stopped is never the best", () => {
    const all = [timed("direct", 10), stopped("fft", 31), stopped("separable", 9)];
    expect(bestOf(all).method).toBe("direct");
    expect(regretOf(all[1]!, all)).toBeCloseTo(2.1, 12);
  });

  test("a method has lost past three times the best, not at it", () => {
    expect([hasLost(30, 10), hasLost(30.1, 10), hasLost(5, Infinity)]).toEqual([false, true, false]);
  });

  test("is summed up by its mean, its quantiles and its worst", () => {
    const summary = summaryOf(Array.from({ length: 200 }, (_, k) => (199 - k) / 100));
    expect(summary).toMatchObject({ problems: 200, worst: 1.99 });
    expect(summary.median).toBeCloseTo(0.995, 12);
    expect(summary.mean).toBeCloseTo(0.995, 12);
    // Interpolated between the times at places ⌊p · 199⌋ and the next (Hyndman & Fan, The American Statistician 50(4): 361–365, 1996, definition 7).
    for (const [part, expected] of [
      [summary.p90, 1.791],
      [summary.p95, 1.8905],
      [summary.p99, 1.9701],
    ] as const)
      expect(part).toBeCloseTo(expected, 12);
  });

  test("misses the bars that it is above", () => {
    const summary = summaryOf([0, 0, 0, 0.5]);
    expect(missed(summary, { median: 0.01, p95: 0.4, p99: 0.5 })).toEqual(["p95"]);
    expect(missed(summary, {})).toEqual([]);
  });
});

describe("repeated profiles", () => {
  const [direct, fft, separable] = [timed("direct", 10), timed("fft", 10.8), timed("separable", 10.05, 1)];

  test("agree where they choose alike; else it tells how far apart their choices are", () => {
    const choices = [
      [direct, direct, direct],
      [direct, fft, direct],
    ];
    expect(agreementOf(choices).changed).toBe(0.5);
    // Of the second three two pairs of three differ.
    expect(agreementOf(choices).changedByPairs).toBeCloseTo(1 / 3, 12);
    expect(agreementOf(choices).apart).toBeCloseTo(0.08, 12);
  });

  test("choices nearer than noise are not apart", () => {
    expect(agreementOf([[direct, separable]])).toEqual({ changed: 1, changedByPairs: 1, apart: 0 });
  });
});

describe("a profile on a problem", () => {
  const shipped = shippedProfiles.find(({ build }) => build === "simd")!;
  const candidate = Array.from({ length: 50 }, (_, index) => candidateAt(index, "simd", shipped)).find((one) => one !== undefined && one.planned.length > 2)!;
  const { problem, kernel, planned } = candidate;
  const [first, second] = planned.map(({ method }) => method) as [Method, Method];

  /** Every method takes what is predicted, but for some that take so many times as long. */
  const recordWith = (factors: Partial<Record<Method, number>>): ProblemRecord => {
    const methods = planned.map((one) => recordOf(timed(one.method, predictedRun(one, shipped) * (factors[one.method] ?? 1), 0), planned));
    return { index: problem.index, name: problem.name, methods };
  };

  test("is judged by the times of what it chooses", () => {
    const chosen = choiceOf(planningProblem(problem, kernel, "simd"), shipped, false);
    expect(chosen).toBe(first);
    const [judged] = judgeRuns([{ record: recordWith({ [first]: 40 }), candidate }], shipped);
    const ratio = (40 * predictedRun(planned[0]!, shipped)) / predictedRun(planned[1]!, shipped);
    expect(judged!.regret).toBeCloseTo(ratio - 1, 2);
    expect(judgeRuns([{ record: recordWith({}), candidate }], shipped)[0]!.regret).toBe(0);
  });

  test("a second timing counts in place of the first", () => {
    const record = { ...recordWith({ [first]: 40 }), again: recordWith({}).methods };
    expect(judgeRuns([{ record, candidate }], shipped)[0]!.regret).toBe(0);
  });

  test("the reason names the method that was mispredicted, and the price that would have been right", () => {
    const [judged] = judgeRuns([{ record: recordWith({ [first]: 40, [second]: 1.1 }), candidate }], shipped);
    const { culprit, price } = reasonOf(judged!, shipped);
    expect(culprit.method).toBe(first);
    expect(culprit.factor).toBeCloseTo(40, 2);
    const mended: HardwareProfile = { ...shipped, nanoseconds: { ...shipped.nanoseconds, [culprit.leading.operation]: price!.needed } };
    expect(predictedRun(planned[0]!, mended) / culprit.measured).toBeCloseTo(1, 3);
  });

  test("contributions add up to the prediction, the dearest first", () => {
    const parts = contributions(planned[0]!, shipped);
    expect(parts.reduce((sum, { milliseconds }) => sum + milliseconds, 0)).toBeCloseTo(predictedRun(planned[0]!, shipped), 9);
    expect(parts.map(({ milliseconds }) => milliseconds)).toEqual(parts.map(({ milliseconds }) => milliseconds).toSorted((a, b) => b - a));
  });
});
