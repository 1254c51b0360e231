import { gamma, unitRoundoff } from "../math/rounding.js";
import type { Problem } from "./problem.js";
import { sampleFacts } from "./samples.js";
import { smallestWeight } from "./weights.js";

/**
 * Output units per working unit: |gain| · full ÷ workingFull for colours. Alpha is not touched by gain: where it is filtered, its own scale
 * (the output's full value for an opaque image) counts if it is larger.
 */
export function outputScale(problem: Problem): number {
  const { request, analysis, workingFull } = problem;
  const colour = (Math.abs(request.output.gain) * sampleFacts[request.sample].full) / workingFull;
  const opaque = sampleFacts[request.output.sample].full / workingFull;
  if (request.alpha === "straight") return Math.max(colour, opaque / Math.abs(analysis.sum));
  return request.alpha === "premultiplied" ? Math.max(colour, opaque) : colour;
}

/**
 * From the error of a method among working floats to the contract's bound in output units:
 *
 *     bound = outputScale · error ÷ (smallest inside weight ÷ Σh)  +  roundings on the way in and out
 *
 * @param error largest error of h∗x among working floats, for |x| ≤ workingFull
 */
export function outputBound(problem: Problem, error: number): number {
  const largest = problem.analysis.absoluteSum * problem.workingFull;
  const all = weighted(problem, error + conversionRoundings(problem) * unitRoundoff * largest);
  return outputScale(problem) * all + Math.abs(problem.request.output.offset) * unitRoundoff;
}

/** Error that the alpha of an opaque image may show: where h∗a is that close to Σh, it is Σh. In working units. */
export function opaqueBound(problem: Problem, error: number): number {
  return weighted(problem, error + 4 * unitRoundoff * problem.analysis.absoluteSum * problem.workingFull);
}

function weighted(problem: Problem, error: number): number {
  return problem.renormalised ? (error * problem.analysis.sum) / smallestWeight(problem) : error;
}

/** Roundings that a value meets besides the sum: decoding, premultiplying, dividing, encoding, gain and offset. */
function conversionRoundings(problem: Problem): number {
  const { light, alpha, output } = problem.request;
  let roundings = 0;
  if (light === "linear") roundings += 4;
  if (alpha === "straight" || alpha === "premultiplied") roundings += 5;
  if (problem.renormalised) roundings += 2;
  if (output.gain !== 1 || output.offset !== 0) roundings += 3;
  return roundings;
}

/** Error of a sum of products: each passes through `roundings` of them, weights sum to `weight` in absolute value. */
export function sumError(problem: Problem, roundings: number, weight: number): number {
  return gamma(roundings) * weight * problem.workingFull;
}

/** True where the exact results are integers among working floats, so that an error below ½ can be taken away. */
export function integerResults(problem: Problem): boolean {
  const { request, analysis } = problem;
  const plainValues = request.light === "encoded" && request.alpha !== "straight" && !problem.renormalised;
  return plainValues && sampleFacts[request.sample].integer && analysis.integer;
}
