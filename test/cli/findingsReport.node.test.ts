import { expect, it } from "vitest";
import { findingsReport } from "../../src/cli/measure/findingsReport.js";
import { shippedProfiles } from "../../src/planning/profile.js";
import type { ProfileCheck } from "../../src/types.js";

/** Made up: predicted times that are off by so much. */
const checksOf = (...errors: number[]): ProfileCheck[] =>
  errors.map((error, k) => ({ problem: `problem ${k}`, method: "direct", predicted: 10 * (1 + error), measured: 10 }));

it.each([
  ["nothing where time sufficed for none", checksOf(), undefined],
  ["one problem alone", checksOf(-0.13), "Held against one other problem, the predicted time was off by 13 %."],
  [
    "several by the middle one and the worst",
    checksOf(0.01, -0.02, 0.3),
    "Held against 3 other problems, predicted times were off by 2.0 % (median), 30 % at most.",
  ],
])("checks of a profile are told: %s", async (_, checks, sentence) => {
  const { text } = await findingsReport({ profile: { ...shippedProfiles[0]!, checks } }, { crossover: false }, []);
  expect(text.split("\n").find((line) => line.startsWith("Held"))).toBe(sentence);
});
