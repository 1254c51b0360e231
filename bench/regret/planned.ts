import { checkedLayout, checkedRequest } from "../../src/api/validate/request.js";
import type { Build, HardwareProfile, Kernel, Method } from "../../src/index.js";
import { choose } from "../../src/planning/choose.js";
import { priceOf, type Prices } from "../../src/planning/cost.js";
import type { Work } from "../../src/planning/method.js";
import { methodNames, variantFor } from "../../src/planning/methods.js";
import { panelsOf } from "../../src/planning/panels.js";
import { problemOf, type Problem } from "../../src/planning/problem.js";
import type { HeldOut } from "./problems.js";

/** What an engine has at most. */
const bytesAvailable = 2 ** 32 - 65_536;

/** A method that applies to a problem. */
export interface Planned {
  method: Method;
  /** The form of the method that stands for it. */
  variant: string;
  work: Work;
  /** Never chosen, whatever it costs: its results may be off by more than a level, and those of another may not. */
  barred: boolean;
}

export function planningProblem({ layout, options }: HeldOut, kernel: Kernel, build: Build): Problem {
  return problemOf(checkedRequest("regret", kernel, checkedLayout("regret", layout), options), build, bytesAvailable);
}

/** The methods that apply, with what an engine would do for each: work of all panels. */
export function plannedFor(problem: Problem): Planned[] {
  const open = methodNames
    .map((name) => variantFor(name, problem))
    .filter((plan) => plan.applicable(problem) === true)
    .map((plan) => ({ plan, close: plan.errorBound(problem) <= 1 }));
  const integers = problem.request.output.sample !== "f32" && open.some(({ close }) => close);
  return open.map(({ plan, close }) => ({
    method: plan.name,
    variant: plan.variant,
    work: panelsOf(plan, problem).work,
    barred: integers && !close,
  }));
}

/** What a profile chooses: for many runs, or for a single one of a kernel that is new. */
export function choiceOf(problem: Problem, profile: HardwareProfile, once: boolean): Method {
  return choose(problem, profile, once).chosen.method;
}

/** Predicted milliseconds of one run. */
export const predictedRun = ({ work }: Planned, profile: HardwareProfile): number => priceOf(work.run, profile.nanoseconds as Prices) / 1e6;

/** Predicted milliseconds of preparing. */
export const predictedSetup = ({ work }: Planned, profile: HardwareProfile): number => priceOf(work.setup, profile.nanoseconds as Prices) / 1e6;
