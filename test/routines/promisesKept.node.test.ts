import { expect, test } from "vitest";
import { code } from "../../src/generated/debug.js";
import { createEngine, type Method } from "../../src/index.js";
import { fc, posed, problems } from "../reference/problems.js";
import { engines } from "../support/engines.js";
import { firstDifference } from "./differences.js";
import { layoutOf, type Question } from "../support/questions.js";

const module = await WebAssembly.compile(Buffer.from(code, "hex"));
const debug = await createEngine({ module });

function forced({ image, kernel, options = {}, correlate = false }: Question, method: Method): void {
  const call = correlate ? "correlate" : "convolve";
  const found = debug[call](image, kernel, { ...options, method });
  const expected = engines.simd[call](image, kernel, { ...options, method });
  const difference = firstDifference(found.data, expected.data);
  if (difference !== undefined) throw new Error(`${method}, debug and shipped build: ${difference}`);
}

test("what planning writes keeps every promise that the core asserts, and asserts change no byte", () => {
  const tried = new Map<Method, number>();
  fc.assert(
    fc.property(problems, (problem) => {
      const question = posed(problem);
      const { image, kernel, options = {}, correlate = false } = question;
      for (const { method, refused } of debug.explain(kernel, layoutOf(image), { ...options, correlate }).candidates) {
        if (refused !== undefined) continue;
        forced(question, method);
        tried.set(method, (tried.get(method) ?? 0) + 1);
      }
    }),
    { numRuns: 150 },
  );
  expect([...tried.keys()].sort()).toEqual(["direct", "fft", "running-sum", "separable"]);
});
