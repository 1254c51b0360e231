import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { questions } from "../../bench/fit/problems.js";
import { fittedWidth, heldOutWidth, isHeldOut } from "../../bench/heldOut.js";
import { candidateCount, candidates, mostMeasured } from "../../bench/regret/candidates.js";
import { choiceOf, planningProblem, predictedRun } from "../../bench/regret/planned.js";
import { problemAt } from "../../bench/regret/problems.js";
import { freshKernel } from "../../bench/regret/taps.js";
import { createEngine } from "../../src/index.js";
import { experiments } from "../../src/measure/experiments.js";
import { shippedProfiles } from "../../src/planning/profile.js";

const shipped = shippedProfiles.find(({ build }) => build === "simd")!;
const all = candidates("simd", shipped);

describe("problems that are judged", () => {
  test("are none of those that prices are fitted to: the ones have odd widths, the others even ones, whatever is drawn", () => {
    expect(
      questions()
        .filter(({ layout }) => isHeldOut(layout))
        .map(({ name }) => name),
    ).toEqual([]);
    expect([...experiments()].filter(({ layout }) => isHeldOut(layout)).map(({ name }) => name)).toEqual([]);
    expect(all.filter(({ problem: { layout } }) => !isHeldOut(layout)).map(({ problem }) => problem.name)).toEqual([]);
    fc.assert(
      fc.property(fc.double({ min: 0, max: 1e7, noNaN: true }), (width) => {
        expect([isHeldOut({ width: fittedWidth(width) }), isHeldOut({ width: heldOutWidth(width) })]).toEqual([false, true]);
        expect(Math.max(Math.abs(fittedWidth(width) - width), Math.abs(heldOutWidth(width) - width))).toBeLessThanOrEqual(2);
      }),
    );
  });

  test("are at least 400, each with a choice, the best method of each predicted to take less than a second", () => {
    expect(new Set(all.map(({ problem }) => problem.index)).size).toBe(candidateCount);
    expect(candidateCount).toBeGreaterThanOrEqual(400);
    for (const { problem, planned } of all) {
      expect(planned.length, problem.name).toBeGreaterThan(1);
      expect(Math.min(...planned.map((one) => predictedRun(one, shipped))), problem.name).toBeLessThan(mostMeasured);
    }
  });

  test("are the same at every draw, alone or among others", () => {
    const { index } = all[17]!.problem;
    expect(problemAt(index)).toEqual(all[17]!.problem);
    expect(problemAt(index + 1).name).not.toBe(problemAt(index).name);
  });

  test("have images and kernels of every size, and every sample type, channel count, border and structure", () => {
    const problems = all.map(({ problem }) => problem);
    const widths = problems.map(({ layout }) => layout.width);
    expect([Math.min(...widths) < 20, Math.max(...widths) > 3800]).toEqual([true, true]);
    const taps = problems.map(({ taps: { rows } }) => rows.length);
    expect([Math.min(...taps), Math.max(...taps) > 240]).toEqual([1, true]);
    // As many kernels below 16 rows as above, by their drawing: 16 is the root of 255.
    expect(Math.abs(taps.filter((rows) => rows < 16).length / taps.length - 0.5)).toBeLessThan(0.1);
    const kinds = new Set(
      problems.flatMap(({ layout: { channels, sample }, taps: { name }, options }) => [
        String(channels),
        sample,
        JSON.stringify(options.border),
        name.replace(/ (but|\d+×).*/, ""),
      ]),
    );
    for (const kind of [
      "1",
      "2",
      "3",
      "4",
      "u8",
      "u16",
      "f32",
      '"renormalised"',
      '"periodic"',
      "any",
      "bell",
      "outer product",
      "rank 2",
      "rank 4",
      "box",
      "disk",
      "line",
    ])
      expect([...kinds]).toContain(kind);
  });

  test("are planned as an engine plans them", async () => {
    const engine = await createEngine({ build: "simd" });
    for (const { problem, kernel, planned } of all.slice(0, 60)) {
      const explanation = engine.explain(kernel, problem.layout, problem.options);
      const problemToPlan = planningProblem(problem, freshKernel(problem.taps), "simd");
      expect(choiceOf(problemToPlan, shipped, false), problem.name).toBe(explanation.method);
      for (const one of planned) {
        const { milliseconds } = explanation.candidates.find(({ method }) => method === one.method)!;
        expect(predictedRun(one, shipped), problem.name).toBeCloseTo(milliseconds!, 9);
      }
    }
    engine.dispose();
  });
});
