import type { Program } from "../runtime/program.js";
import type { Method } from "../types.js";
import type { Counts } from "./cost.js";
import type { Problem } from "./problem.js";

/** Exact operation counts, and the memory that the filter owns. */
export interface Work {
  /** Once, while preparing. */
  setup: Counts;
  /** Each run. */
  run: Counts;
  bytes: number;
  /** Multiply–adds of the shortest call into the core, where it can be long: two rows of results under a large kernel. */
  leastCall?: number;
}

/** The cast of every method, in this order; planning/methods is the table of them. */
export interface MethodPlan {
  readonly name: Method;
  /** Which form of the method this is: its word in tests and benchmarks. */
  readonly variant: string;
  /** True, or the sentence that `explain` prints. */
  applicable(problem: Problem): true | string;
  work(problem: Problem): Work;
  /** Largest difference from the exact result before rounding, in output units; see planning/accuracy. */
  errorBound(problem: Problem): number;
  /** What decides the bytes of the result, in words. */
  arithmetic(problem: Problem): string;
  /** Phases of a run, where several threads can work on one program together: see Program. Other methods are cut into bands. */
  phases?(problem: Problem): number;
  /** Separable terms that are summed, where the method has any. */
  terms?(problem: Problem): number;
  program(problem: Problem): Program;
}
