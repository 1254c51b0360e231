import { describe, expect, test } from "vitest";
import { publishedCases } from "../published/cases/index.js";
import { difference, magnitudeOf } from "../support/publishedCase.js";
import { definedAnswer } from "../support/questions.js";

/** The reference is trusted because it gives what others printed, before any engine is asked. */
describe.each(Object.entries(publishedCases))("the definition gives the results of: %s", (_, cases) => {
  test.each(cases)("$title", ({ question, expected, printedWithin }) => {
    expect(difference(definedAnswer(question), expected, magnitudeOf(question), printedWithin)).toBeUndefined();
  });
});
