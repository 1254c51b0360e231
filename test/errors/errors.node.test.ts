import { describe, expect, test } from "vitest";
import { ConvolutionError, type ErrorCode } from "../../src/index.js";
import { faultOfCode } from "../../src/errors.js";
import { makeBench } from "./bench.js";
import { images, kernelsAndBorders, namesAndNumbers, targets } from "./callerCases.js";
import { commandLine } from "./commandLineCases.js";
import type { ErrorCase } from "./errorCase.js";
import { states } from "./hostCases.js";
import { jobs } from "./jobCases.js";

/** A code without a row does not compile. */
const table: Record<ErrorCode, ErrorCase[]> = { ...namesAndNumbers, ...images, ...targets, ...kernelsAndBorders, ...states, ...jobs, ...commandLine };

async function errorOf(act: () => unknown): Promise<unknown> {
  try {
    await act();
  } catch (error) {
    return error;
  }
  return undefined;
}

/** What was found and needed, then what to do: at least two sentences, or one with a colon or semicolon. */
const foundAndAdvice = /\S[.:;?] .*[.?!)]$/s;

describe.each(Object.entries(table) as [ErrorCode, ErrorCase[]][])("%s", (code, cases) => {
  test("has a case", () => expect(cases.length).toBeGreaterThan(0));

  test.each(cases)("$title", async ({ act, says = [] }) => {
    const bench = await makeBench();
    const error = await errorOf(() => act(bench));
    expect(error).toBeInstanceOf(ConvolutionError);
    const { message, expected, received, ...rest } = error as ConvolutionError;
    expect({ code: rest.code, message }).toEqual({ code, message });
    expect(rest.fault).toBe(faultOfCode[code]);
    expect(rest.name).toBe("ConvolutionError");
    expect(expected).toBeDefined();
    expect(received).toBeDefined();
    for (const part of says) {
      if (typeof part === "string") expect(message).toContain(part);
      else expect(message).toMatch(part);
    }
    if (code !== "method-not-applicable") expect(message).toMatch(foundAndAdvice);
    bench.settle((actual, wanted) => expect(actual).toEqual(wanted));
  });
});

test("a forced method that does not apply fails with the sentence of explain", async () => {
  const bench = await makeBench();
  const { candidates } = bench.engine.explain(bench.kernel, { width: 6, height: 5, channels: 1, sample: "u8" }, { tolerance: 0 });
  const refusals = candidates.filter(({ refused }) => refused !== undefined);
  expect(refusals.map(({ method }) => method)).toContain("running-sum");
  for (const { method, refused } of refusals) {
    const error = await errorOf(() => bench.engine.convolve(bench.image, bench.kernel, { method, tolerance: 0 }));
    expect(error).toMatchObject({ code: "method-not-applicable", message: refused });
  }
  bench.settle((actual, wanted) => expect(actual).toEqual(wanted));
});
