import type { Method, Raster } from "../../src/index.js";
import { shuffled } from "../inputs.js";
import type { HeldOut } from "./problems.js";
import { hasLost, typical, type MethodTook, type Took } from "./statistics.js";
import { freshKernel } from "./taps.js";
import { shortestMilliseconds, took, turnsFor, type Bench, type Effort } from "./timing.js";

/** What a single call took, by what was asked for: a method by its name, or the engine's own choice. */
export type OnceTook = { method: Method | "auto" } & Took;

const effort: Effort = { milliseconds: 250, turns: [5, 21] };

/** A call that a single look has shown to take more than this is not looked at twice. */
const longMilliseconds = 30;

const leastTurns = 3;

/** Who takes part in single calls. */
interface Caller {
  method: Method | "auto";
  /** Calls of one turn, each with a kernel of its own. */
  batch: number;
  fastest: number;
  times: number[];
}

/** Milliseconds of one call of `convolve` with a kernel that is new to everybody. */
function timeCalls({ engine, clock }: Bench, { taps, options }: HeldOut, image: Raster, { method, batch }: Caller): number {
  const kernels = Array.from({ length: batch }, () => freshKernel(taps));
  const begun = clock();
  for (const kernel of kernels) engine.convolve(image, kernel, { ...options, method });
  return (clock() - begun) / batch;
}

function look(bench: Bench, problem: HeldOut, image: Raster, caller: Caller): void {
  for (let call = 0; call < 3 && (call < 1 || caller.fastest < longMilliseconds); call += 1) {
    caller.fastest = Math.min(caller.fastest, timeCalls(bench, problem, image, caller));
    caller.batch = Math.max(1, Math.ceil(shortestMilliseconds / Math.max(0.01, caller.fastest)));
  }
}

/**
 * Times single calls, `auto` among them, in turns. A method whose mere run takes more than three times the best call has lost without a call.
 *
 * @param known how long the methods' runs took
 */
export function timeOnce(bench: Bench, problem: HeldOut, image: Raster, known: readonly MethodTook[]): OnceTook[] {
  const callers: Caller[] = [];
  const lost: OnceTook[] = [];
  const best = (): number => Math.min(...callers.filter(({ method }) => method !== "auto").map(({ fastest }) => fastest));
  const inOrder = known.toSorted((a, b) => typical(a) - typical(b));
  for (const { method, runs } of [{ method: "auto" as const, runs: 0 }, ...inOrder.map((one) => ({ method: one.method, runs: typical(one) }))]) {
    if (hasLost(runs, best())) {
      lost.push({ method, atLeast: runs });
      continue;
    }
    const caller: Caller = { method, batch: 1, fastest: Infinity, times: [] };
    look(bench, problem, image, caller);
    callers.push(caller);
  }
  // Looks follow each other and may all fall into one disturbance: nobody has lost before a few turns among others.
  const isIn = ({ method, fastest, times }: Caller): boolean => method === "auto" || times.length < leastTurns || !hasLost(fastest, best());
  const left = (): Caller[] => callers.filter(isIn);
  const turns = turnsFor(effort, left());
  for (let turn = 0; turn < turns; turn += 1) {
    for (const caller of shuffled(left(), problem.index * 64 + turn)) {
      const time = timeCalls(bench, problem, image, caller);
      caller.times.push(time);
      caller.fastest = Math.min(caller.fastest, time);
    }
  }
  const kept = left();
  return [...callers.map((caller) => took(caller.method, caller, kept.includes(caller))), ...lost];
}
