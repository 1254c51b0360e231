import type { BorderRule } from "../types.js";
import { methodNames, variantFor } from "./methods.js";
import type { Problem } from "./problem.js";

const shownRule = (rule: BorderRule): string => (typeof rule === "object" ? "constant" : rule);

/** How each method would go about it: its form, how many terms it sums, and which tiles the memory leaves it. */
function forms(problem: Problem): string {
  const applicable = methodNames.map((name) => variantFor(name, problem)).filter((plan) => plan.applicable(problem) === true);
  return applicable
    .map((plan) => [plan.name, plan.variant, plan.terms?.(problem), plan.phases && plan.arithmetic(problem)].filter((word) => word !== undefined).join(" "))
    .join(", ");
}

/** Taps that are not 0, to the next power of 2: what a list of them costs. */
const magnitude = ({ analysis }: Problem): number => 32 - Math.clz32(analysis.kept());

/**
 * What problems have in common for which one method is fastest on one machine, whatever the values of the taps and samples. Two problems of one
 * shape count the same operations, but for lists of taps.
 */
export function shapeOf(problem: Problem): string {
  const { request, horizontal, vertical, crew } = problem;
  const { width, height, channels, sample, output, extent, region, alpha, light } = request;
  return [
    `${width}×${height}×${channels} ${sample} to ${output.sample}`,
    `${horizontal.taps}×${vertical.taps} taps, 2^${magnitude(problem)} not 0`,
    `${shownRule(request.rows)}/${shownRule(request.columns)} ${extent} ${region.x},${region.y},${region.width}×${region.height}`,
    `${alpha} ${light}`,
    `${crew.threads} threads`,
    forms(problem),
  ].join("; ");
}
