import { ConvolutionError } from "../errors.js";
import type { Kernel } from "../kernels/index.js";
import { blockBytesOf } from "../runtime/execute.js";
import type { Program } from "../runtime/program.js";
import type { HardwareProfile } from "../types.js";
import { analyse } from "./analysis.js";
import { programsOf } from "./bands.js";
import { choose, type Choice } from "./choose.js";
import { variantFor } from "./methods.js";
import type { Problem, Request } from "./problem.js";

/** The same problem with other taps: axes, parts and tiles are taken over, so that no byte of memory moves. */
function withTaps(problem: Problem, request: Request): Problem {
  const { whole, together } = problem;
  return {
    ...problem,
    request,
    analysis: analyse(request.kernel),
    like: problem.like ?? problem,
    ...(whole ? { whole: withTaps(whole, request) } : {}),
    ...(together ? { together: { ...together, alone: withTaps(together.alone, request) } } : {}),
  };
}

/** A plan with other taps, and its programs for the memory that the filter has. */
export interface KernelChange {
  problem: Problem;
  choice: Choice;
  blocks: Program[][];
}

/**
 * Plans other taps of the same size and origin by the method that a filter was prepared with. Its variant is the one that a new filter would
 * have, its parts and tiles are those that there are.
 *
 * @param available bytes of the filter's blocks of memory
 * @throws ConvolutionError `method-not-applicable`, `kernel-mismatch` (they need more memory than the filter has)
 */
export function changeKernel(problem: Problem, choice: Choice, available: readonly number[], kernel: Kernel): KernelChange {
  const request = { ...problem.request, kernel };
  const changed = withTaps(problem, request);
  const { name } = choice.plan;
  const plan = variantFor(name, changed);
  const applies = plan.applicable(changed);
  if (applies !== true) throw notApplicable(`replaceKernel: the filter was prepared for the method ${name}. ${applies}`, name);
  const division = { ...choice.division, blocks: choice.division.blocks.map((parts) => parts.map((part) => withTaps(part, request))) };
  const blocks = programsOf(plan, division);
  const needed = blocks.map(blockBytesOf);
  if (needed.some((bytes, block) => bytes > available[block]!)) throw tooLarge(needed, available);
  return { problem: changed, choice: { ...choice, plan, division }, blocks };
}

/**
 * How all methods fare with other taps, the filter's own as it stands: with the parts, the tiles and the memory that it has.
 */
export function choiceExplained({ problem, choice }: KernelChange, profile: HardwareProfile): Choice {
  const { plan, division } = choice;
  const parts = division.blocks.flat();
  const { candidates, chosen } = choose({ ...problem, request: { ...problem.request, method: plan.name } }, profile, false);
  const own = {
    ...chosen,
    bytes: choice.chosen.bytes!,
    errorBound: parts.reduce((most, part) => Math.max(most, plan.errorBound(part)), 0),
    arithmetic: [...new Set(parts.map((part) => plan.arithmetic(part)))].join("; "),
  };
  return { ...choice, chosen: own, candidates: candidates.map((candidate) => (candidate === chosen ? own : candidate)) };
}

function notApplicable(found: string, method: string): ConvolutionError {
  const message = `${found} Prepare a filter for this kernel.`;
  return new ConvolutionError("method-not-applicable", message, { expected: `taps that ${method} applies to`, received: "other taps" });
}

function tooLarge(needed: readonly number[], available: readonly number[]): ConvolutionError {
  const sum = (bytes: readonly number[]): number => bytes.reduce((total, each) => total + each, 0);
  const message = `replaceKernel: these taps need ${sum(needed)} bytes of engine memory (more separable terms, or another arithmetic), the filter has ${sum(available)}. Prepare a filter for this kernel.`;
  return new ConvolutionError("kernel-mismatch", message, { expected: `at most ${sum(available)} bytes`, received: sum(needed) });
}
