import { expect, test } from "vitest";
import { engines } from "../support/engines.js";
import { layoutOf } from "../support/questions.js";
import { propertyRuns } from "../support/runs.js";
import { checkQuestion } from "./checkQuestion.js";
import { fc, posed, problems } from "./problems.js";

test("every method of every build gives the definition's result within the bound it states", () => {
  fc.assert(
    fc.property(problems, (problem) => checkQuestion(posed(problem))),
    { numRuns: propertyRuns },
  );
});

test("the problems that are tried reach every rule, extent, alpha mode and method", () => {
  const reached = new Set<string>();
  for (const problem of fc.sample(problems, { seed: 20, numRuns: 600 })) {
    const { options = {}, image, kernel, correlate = false } = posed(problem);
    for (const part of [options.alpha, options.light, options.extent, problem.rows, problem.columns, problem.sample, problem.kernelKind])
      reached.add(String(part));
    const { candidates } = engines.simd.explain(kernel, layoutOf(image), { ...options, correlate });
    for (const { method, refused } of candidates) if (refused === undefined) reached.add(method);
  }
  const wanted = [
    "straight",
    "premultiplied",
    "keep",
    "none",
    "linear",
    "same",
    "full",
    "valid",
    "replicate",
    "zero",
    "periodic",
    "half-sample-symmetric",
    "whole-sample-symmetric",
    "renormalised",
    "constant",
    "constants",
    "u8",
    "u8-clamped",
    "u16",
    "f32",
    "direct",
    "separable",
    "fft",
    "running-sum",
  ];
  expect(wanted.filter((name) => !reached.has(name))).toEqual([]);
});
