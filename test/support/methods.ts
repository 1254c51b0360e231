import type { Build } from "../../src/index.js";
import { applicable, run, type Applicable } from "./answers.js";
import { builds } from "./engines.js";
import type { Question } from "./questions.js";

/** One method of one build that applies to a question. */
export interface Way extends Applicable {
  build: Build;
  /** Runs this method of this build on a question (the same or another one). */
  answer(question: Question): Float32Array | Uint8Array | Uint8ClampedArray | Uint16Array;
}

/** Every method of every build that applies. */
export function ways(question: Question): Way[] {
  return builds.flatMap((build) =>
    applicable(build, question).map((found) => ({ ...found, build, answer: (asked: Question) => run(build, asked, found.method).data })),
  );
}

/** What the method promises for another question; a test's error where it does not apply there. */
export function promiseOf({ build, method }: Way, question: Question): Applicable {
  const found = applicable(build, question).find((candidate) => candidate.method === method);
  if (found === undefined) throw new Error(`${build} ${method} does not apply to the second question`);
  return found;
}

/** Largest absolute difference of two results. */
export function largestDifference(a: ArrayLike<number>, b: ArrayLike<number>): number {
  if (a.length !== b.length) return Infinity;
  let largest = 0;
  for (let index = 0; index < a.length; index++) {
    const difference = Math.abs(a[index]! - b[index]!);
    if (!(difference <= largest)) largest = difference;
  }
  return largest;
}

/** Σ|h|: how much a filter can enlarge an error of its input. */
export function absoluteSum(taps: Float64Array): number {
  return taps.reduce((total, tap) => total + Math.abs(tap), 0);
}

/** The first sample in which two results differ, as a sentence; far quicker on large arrays than a matcher. NaN is like NaN. */
export function firstDifference(actual: ArrayLike<number>, expected: ArrayLike<number>): string | undefined {
  if (actual.length !== expected.length) return `${actual.length} samples, not ${expected.length}`;
  for (let index = 0; index < actual.length; index++) {
    if (!Object.is(actual[index], expected[index])) return `sample ${index} is ${actual[index]}, not ${expected[index]}`;
  }
  return undefined;
}
