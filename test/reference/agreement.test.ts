import { expect, test } from "vitest";
import { arrays } from "../support/noise.js";
import { propertyRuns } from "../support/runs.js";
import { judge } from "./agreement.js";
import { fc, posed, problems } from "./problems.js";

/** Rounding to single precision once, for the values that a problem can have. */
function oneRounding(exact: Float64Array, touched: Uint8Array): number {
  return exact.reduce((largest, value, index) => (touched[index] ? largest : Math.max(largest, Math.abs(value))), 2 ** -120) * 2 ** -24;
}

/** Where a tiny weight alone falls inside, the renormalised border leaves any result free. */
function plainKind<K extends string>(kind: K): K | "positive" {
  return kind === "denormal" || kind === "tails" ? "positive" : kind;
}

test("the judge accepts the definition's own result, written", () => {
  fc.assert(
    fc.property(problems, (problem) => {
      const { image, kernel, options, correlate } = posed(problem);
      const { defined, disagreement } = judge(image, kernel, options, correlate);
      const data = arrays[defined.sample].from(defined.written);
      const found = disagreement({ ...defined, data }, oneRounding(defined.exact, defined.touched));
      if (found !== undefined) throw new Error(found);
    }),
    { numRuns: propertyRuns },
  );
});

test("the judge refuses a result that is further off than the bound in one sample", () => {
  fc.assert(
    fc.property(problems, fc.nat(), (problem, place) => {
      const { image, kernel, options, correlate } = posed({
        ...problem,
        kernelKind: plainKind(problem.kernelKind),
        imageKind: "noise",
        alpha: "none",
        light: "encoded",
      });
      const { defined, disagreement } = judge(image, kernel, options, correlate);
      const data = arrays[defined.sample].from(defined.written);
      const index = place % data.length;
      const bound = defined.sample === "f32" ? oneRounding(defined.exact, defined.touched) : 0.25;
      data[index] = defined.sample === "f32" ? data[index]! + 8 * bound * defined.magnitude + 2 ** -60 : data[index]! < 2 ? data[index]! + 2 : data[index]! - 2;
      expect(disagreement({ ...defined, data }, bound)).toMatch(/^row \d+, column \d+, channel \d+: got/);
    }),
    { numRuns: propertyRuns },
  );
});
