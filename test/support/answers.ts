import type { Build, Method, ResultRaster } from "../../src/index.js";
import { builds, engines } from "./engines.js";
import { definedAnswer, layoutOf, type Answer, type Question } from "./questions.js";

/** A method that applies, with what it promises. */
export interface Applicable {
  method: Method;
  errorBound: number;
  arithmetic: string;
  /** Separable terms that are summed. */
  terms: number;
}

/** The methods that apply to a question, with their bounds, as one build explains them. */
export function applicable(build: Build, { image, kernel, options = {}, correlate = false }: Question): Applicable[] {
  const { candidates } = engines[build].explain(kernel, layoutOf(image), { ...options, correlate });
  return candidates.flatMap(({ method, refused, errorBound, arithmetic, terms = 1 }) =>
    refused === undefined ? [{ method, errorBound: errorBound!, arithmetic: arithmetic!, terms }] : [],
  );
}

/** Runs one method of one build. */
export function run(build: Build, question: Question, method: Method | "auto" = "auto"): ResultRaster {
  const { image, kernel, options = {}, correlate = false } = question;
  const engine = engines[build];
  return correlate ? engine.correlate(image, kernel, { ...options, method }) : engine.convolve(image, kernel, { ...options, method });
}

/** The answers of every applicable method of every build. */
export function engineAnswers(question: Question): Answer[] {
  return builds.flatMap((build) =>
    applicable(build, question).map(({ method, errorBound, terms }) => ({ from: `${build} ${method}`, ...run(build, question, method), errorBound, terms })),
  );
}

/** The definition's answer and those of every applicable method of every build. */
export function allAnswers(question: Question): Answer[] {
  return [definedAnswer(question), ...engineAnswers(question)];
}
