import { ConvolutionError } from "../errors.js";
import type { Candidate, HardwareProfile, Method, Verdict } from "../types.js";
import { divisionOf, type Division } from "./bands.js";
import { priceOf, type Prices } from "./cost.js";
import type { MethodPlan } from "./method.js";
import { methodNames, variantFor } from "./methods.js";
import type { Problem } from "./problem.js";

/** A candidate with the numbers that the choice is made by. */
interface Priced {
  plan: MethodPlan;
  candidate: Candidate;
}

/** The outcome of planning: the method that wins, and how every method fared. */
export interface Choice {
  plan: MethodPlan;
  chosen: Candidate;
  candidates: Candidate[];
  division: Division;
  /** What decided instead of predictions, where problems of the shape have been timed. */
  verdict?: Verdict;
}

/** Two costs nearer than a hundredth, or than a quarter of what a call costs, are a tie: no profile predicts better. */
const tieShare = 0.01;
const tieOf = (prices: Prices): number => prices.run / 4e6;

/** Of parts of one width side by side those that may differ from each other: the first, one inside, the last. */
const differing = (parts: readonly Problem[]): Problem[] => (parts.length <= 3 ? [...parts] : [parts[0]!, parts[1]!, parts.at(-1)!]);

function price(plan: MethodPlan, problem: Problem, profile: HardwareProfile): Candidate {
  const applies = plan.applicable(problem);
  if (applies !== true) return { method: plan.name, refused: applies };
  const prices = profile.nanoseconds as Prices;
  const { blocks, work, threads } = divisionOf(plan, problem, prices);
  const { setup, run, bytes } = work;
  const problems = blocks.flatMap(differing);
  const candidate: Candidate = {
    method: plan.name,
    milliseconds: priceOf(run, prices) / 1e6,
    setupMilliseconds: priceOf(setup, prices) / 1e6,
    bytes,
    errorBound: problems.reduce((most, part) => Math.max(most, plan.errorBound(part)), 0),
    arithmetic: [...new Set(problems.map((part) => plan.arithmetic(part)))].join("; "),
  };
  if (problem.crew.threads > 1) candidate.threads = threads;
  if (plan.terms) candidate.terms = plan.terms(problem);
  if (bytes <= problem.bytesAvailable) return candidate;
  return { ...candidate, refused: `It needs ${bytes} bytes of engine memory, ${Math.floor(problem.bytesAvailable)} are to be had.` };
}

const cost = (candidate: Candidate, once: boolean): number => candidate.milliseconds! + (once ? candidate.setupMilliseconds! : 0);

/** The cheaper one; of two that tie the one with the smaller error bound, then with fewer bytes. */
function better(a: Priced, b: Priced, once: boolean, prices: Prices): Priced {
  const [costA, costB] = [cost(a.candidate, once), cost(b.candidate, once)];
  if (Math.abs(costA - costB) > Math.max(tieOf(prices), tieShare * Math.min(costA, costB))) return costA < costB ? a : b;
  if (a.candidate.errorBound !== b.candidate.errorBound) return a.candidate.errorBound! < b.candidate.errorBound! ? a : b;
  return a.candidate.bytes! <= b.candidate.bytes! ? a : b;
}

/** Those that may win: where results are integers, not the ones that may be off by more than a level, as long as another may not. */
function eligible<T>(all: readonly T[], candidateOf: (one: T) => Candidate, integers: boolean): T[] {
  const open = all.filter((one) => candidateOf(one).refused === undefined);
  const close = open.filter((one) => candidateOf(one).errorBound! <= 1);
  return integers && close.length > 0 ? close : open;
}

/** Candidates of a choice that may win. */
export const eligibleCandidates = (problem: Problem, { candidates }: Choice): Candidate[] =>
  eligible(candidates, (candidate) => candidate, problem.request.output.sample !== "f32");

/**
 * Compares the methods that apply.
 *
 * @param once true where the filter will run a single time: setting up counts then
 * @param verdict of problems of this shape that have been timed: it decides, where its method applies and fits
 * @throws ConvolutionError `method-not-applicable` for a forced method, `memory-limit` where none fits
 */
export function choose(problem: Problem, profile: HardwareProfile, once: boolean, verdict?: Verdict): Choice {
  const all: Priced[] = methodNames.map((name) => {
    const plan = variantFor(name, problem);
    return { plan, candidate: price(plan, problem, profile) };
  });
  const candidates = all.map(({ candidate }) => candidate);
  const { method } = problem.request;
  const outcome = ({ plan, candidate }: Priced): Choice => ({
    plan,
    chosen: candidate,
    candidates,
    division: divisionOf(plan, problem, profile.nanoseconds as Prices),
  });
  if (method !== "auto") return outcome(forced(all, method, problem));
  const open = eligible(all, ({ candidate }) => candidate, problem.request.output.sample !== "f32");
  if (open.length === 0) throw outOfMemory(candidates, problem);
  const measured = open.find(({ plan }) => plan.name === verdict?.method);
  if (measured && verdict) return { ...outcome(measured), verdict };
  return outcome(open.reduce((a, b) => better(a, b, once, profile.nanoseconds as Prices)));
}

function forced(all: Priced[], method: Method, problem: Problem): Priced {
  const asked = all.find(({ plan: { name } }) => name === method)!;
  const { candidate } = asked;
  if (candidate.refused === undefined) return asked;
  if (candidate.bytes !== undefined) throw outOfMemory([candidate], problem);
  const others = all.filter((other) => other.candidate.refused === undefined).map((other) => other.plan.name);
  throw new ConvolutionError("method-not-applicable", candidate.refused, { expected: ["auto", ...others], received: method });
}

function outOfMemory(candidates: Candidate[], problem: Problem): ConvolutionError {
  const least = Math.min(...candidates.map(({ bytes }) => bytes ?? Infinity));
  const available = Math.floor(problem.bytesAvailable);
  const message = `The filter needs at least ${least} bytes of engine memory, ${available} are to be had. Raise memoryLimit, dispose filters that are not needed, or filter by regions.`;
  return new ConvolutionError("memory-limit", message, { expected: `at most ${available} bytes`, received: least });
}
