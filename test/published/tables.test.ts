import { describe, expect, test } from "vitest";
import { engineAnswers } from "../support/answers.js";
import { difference, magnitudeOf } from "../support/publishedCase.js";
import { publishedCases } from "./cases/index.js";

/** The sources stand with the tables, in cases/. */
describe.each(Object.entries(publishedCases))("every method of every build gives the results of: %s", (_, cases) => {
  test.each(cases)("$title", ({ question, expected, printedWithin }) => {
    const answers = engineAnswers(question);
    expect(answers.length).toBeGreaterThan(1);
    for (const answer of answers) expect(difference(answer, expected, magnitudeOf(question), printedWithin)).toBeUndefined();
  });
});
