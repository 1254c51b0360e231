import { describe, expect, test } from "vitest";
import { workOf } from "../../src/api/work.js";
import { experiments, isExperimentWidth } from "../../src/measure/experiments.js";
import { groups } from "../../src/measure/groups.js";
import { operationNames } from "../../src/planning/cost.js";

const all = [...experiments()];

test("every experiment's width is even, as those of the problems that profiles are judged by are odd", () => {
  expect(all.map(({ layout }) => layout.width).filter((width) => !isExperimentWidth(width))).toEqual([]);
  expect([641, 321, 17].filter(isExperimentWidth)).toEqual([]);
});

test("no two experiments have one name", () => {
  expect(new Set(all.map(({ name }) => name)).size).toBe(all.length);
});

test("every operation is in one group", () => {
  expect(groups.flat().toSorted()).toEqual(operationNames.toSorted());
});

describe.each(["simd", "scalar"] as const)("with the %s build", (build) => {
  test("every operation of one thread is counted by an experiment, so that no price is left to its group alone", () => {
    const counted = new Set<string>();
    for (const { options, kernel, layout } of all) {
      const work = workOf(options.method, build, kernel, layout, options);
      for (const counts of work ? [work.run, work.setup] : []) for (const [name, count] of Object.entries(counts)) if (count > 0) counted.add(name);
    }
    const ofThreads = ["handOver", "meeting", "handedByte"];
    expect(operationNames.filter((name) => !counted.has(name) && !ofThreads.includes(name))).toEqual([]);
  });

  test("each has work on one method that applies", () => {
    expect(all.filter(({ options, kernel, layout }) => !workOf(options.method, build, kernel, layout, options)).map(({ name }) => name)).toEqual([]);
  });
});
