import { gamma, unitRoundoff } from "../math/rounding.js";
import type { Problem } from "./problem.js";
import { sampleFacts } from "./samples.js";
import { tiny } from "./tiny.js";
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

/** How far a method may be off among working floats, for |x| ≤ workingFull. */
export interface MethodError {
  /** Roundings of sums whose terms have one sign where the border is renormalised: as small beside a small inside weight as beside Σh. */
  relative: number;
  /** Everything else (transform noise, dropped terms): it stays where the weight is small, and is divided by it. */
  absolute: number;
  /** The part of it that a transform spreads over all results, also where there is nothing. */
  noise?: number;
}

/**
 * From the error of a method to the contract's bound in output units:
 *
 *     bound = outputScale · (relative + absolute ÷ (smallest inside weight ÷ Σh))  +  roundings on the way in and out
 */
export function outputBound(problem: Problem, error: MethodError): number {
  const { analysis, workingFull, request } = problem;
  const conversions = conversionRoundings(problem) * unitRoundoff * analysis.absoluteSum * workingFull;
  const alpha = request.alpha === "none" ? 0 : 4 * unitRoundoff * sampleFacts[request.output.sample].full;
  return outputScale(problem) * (weighted(problem, error) + conversions) + alpha + Math.abs(request.output.offset) * unitRoundoff;
}

/** Error that the alpha of an opaque image may show: where h∗a is that close to Σh, it is Σh. In working units. */
export function opaqueBound(problem: Problem, error: MethodError): number {
  return weighted(problem, error) + 4 * unitRoundoff * problem.analysis.absoluteSum * problem.workingFull;
}

/**
 * Alpha that is nothing but a transform's noise: where the computed h∗a is no larger, there is none. A quarter of the bound, which noise
 * stays well below; other methods have no noise where there is nothing.
 */
export function transparentBound(problem: Problem, { noise = 0 }: MethodError): number {
  return noise / 4 / leastWeight(problem);
}

/** The smallest inside weight as a part of Σh; 1 but for the renormalised border, and where there is none at all: results are 0 then. */
export function leastWeight(problem: Problem): number {
  const smallest = problem.renormalised ? smallestWeight(problem.whole ?? problem) : Infinity;
  return smallest === Infinity ? 1 : smallest / problem.analysis.sum;
}

function weighted(problem: Problem, { relative, absolute }: MethodError): number {
  return relative + absolute / leastWeight(problem);
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

/** 2⁻¹⁴⁹, the step of single precision below 2⁻¹²⁶: products and taps down there are rounded by half of it. */
const smallestStep = 1.401298464324817e-45;

/**
 * What is lost near 0 in a sum over all taps: roundings there, taps that became 0 (Σ|them| = `leftOut`), and samples of floats below `tiny`,
 * each once as a colour and once as the alpha that it is multiplied by.
 */
export function underflow(
  { horizontal, vertical, workingFull, request, analysis }: Problem,
  leftOut = analysis.leftOut(),
  weight = analysis.absoluteSum,
): number {
  const steps = horizontal.taps * vertical.taps * smallestStep * (1 + workingFull);
  const samples = sampleFacts[request.sample].integer ? 0 : 2 * tiny * weight;
  return steps + leftOut * workingFull + samples;
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
