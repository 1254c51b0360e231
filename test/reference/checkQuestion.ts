import { ConvolutionError, type Build, type Candidate, type Method } from "../../src/index.js";
import { run } from "../support/answers.js";
import { builds, engines } from "../support/engines.js";
import { firstDifference } from "../support/methods.js";
import { layoutOf, type Question } from "../support/questions.js";
import { judge, type Judge } from "./agreement.js";
import type { Defined } from "./definition.js";

/** A method that does not apply refuses with the sentence that `explain` gave. */
function checkRefusal(build: Build, question: Question, method: Method, sentence: string): void {
  let raised: unknown;
  try {
    run(build, question, method);
  } catch (error) {
    raised = error;
  }
  const fits = raised instanceof ConvolutionError && raised.code === "method-not-applicable" && raised.message === sentence;
  if (!fits) throw new Error(`${build} ${method}: explained as refused ("${sentence}"), but forced it gave ${String(raised)}`);
}

function checkCandidate(build: Build, question: Question, candidate: Candidate, judged: Judge): ArrayLike<number> | undefined {
  const { method, refused, errorBound } = candidate;
  if (refused !== undefined) {
    checkRefusal(build, question, method, refused);
    return undefined;
  }
  const renormalised = JSON.stringify(question.options?.border ?? "").includes("renormalised");
  // Division by a weight so small that its contributions may be left out leaves no finite bound.
  const weightless = renormalised || Math.abs(question.kernel.sum) < 2 ** -100;
  if (errorBound === undefined || !(errorBound >= 0) || (errorBound === Infinity && !weightless))
    throw new Error(`${build} ${method}: errorBound ${errorBound}`);
  const result = run(build, question, method);
  const disagreement = judged.disagreement(result, errorBound);
  if (disagreement !== undefined) throw new Error(`${build} ${method}, errorBound ${errorBound}: ${disagreement}`);
  return result.data;
}

/** The same arithmetic gives the same samples in every build but the fused one, which rounds products or not as the processor can, wherever the results are finite by right. */
function checkSameSamples(byBuild: ReadonlyMap<string, ArrayLike<number>>, defined: Defined): void {
  const [first, ...others] = [...byBuild.entries()];
  if (first === undefined) return;
  for (const [name, samples] of others) {
    for (let index = 0; index < samples.length; index++) {
      if (samples[index] === first[1][index] || defined.touched[index]) continue;
      throw new Error(`sample ${index}: ${first[0]} gives ${first[1][index]}, ${name} gives ${samples[index]}`);
    }
  }
}

/** Throws, with a sentence, where any method of any build breaks a promise on this question. */
export function checkQuestion(question: Question): void {
  const { image, kernel, options = {}, correlate = false } = question;
  const before = image.data.slice();
  const judged = judge(image, kernel, options, correlate);
  const results = new Map<Method, Map<string, ArrayLike<number>>>();
  for (const build of builds) {
    const explanation = engines[build].explain(kernel, layoutOf(image), { ...options, correlate });
    for (const candidate of explanation.candidates) {
      const samples = checkCandidate(build, question, candidate, judged);
      if (samples === undefined) continue;
      if (build === "relaxed-simd") continue;
      const byBuild = results.get(candidate.method) ?? new Map<string, ArrayLike<number>>();
      results.set(candidate.method, byBuild.set(`${build} ${candidate.method} (${candidate.arithmetic})`, samples));
    }
    const filter = engines[build].prepare(kernel, layoutOf(image), { ...options, correlate });
    const disagreement = judged.disagreement(filter.run(image), filter.explanation.errorBound);
    filter.dispose();
    if (disagreement !== undefined) throw new Error(`${build}, prepared, ${filter.explanation.method}: ${disagreement}`);
  }
  for (const byBuild of results.values()) checkSameSamples(byBuild, judged.defined);
  const changed = firstDifference(image.data, before);
  if (changed !== undefined) throw new Error(`the image was changed: ${changed}`);
}
