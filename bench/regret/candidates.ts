import type { Build, HardwareProfile, Kernel } from "../../src/index.js";
import type { Problem } from "../../src/planning/problem.js";
import { arrays } from "../../test/support/noise.js";
import { plannedFor, planningProblem, predictedRun, type Planned } from "./planned.js";
import { problemAt, type HeldOut } from "./problems.js";
import { freshKernel } from "./taps.js";

/** A held-out problem that takes part, with the methods that may be chosen for it, the ones predicted to be fastest first. */
export interface Candidate {
  problem: HeldOut;
  kernel: Kernel;
  planned: Planned[];
  /** Bytes of a result. */
  resultBytes: number;
}

/** Problems that take part, a few of which may turn out to take longer than a second. */
export const candidateCount = 408;

/** The best method is predicted to take at most this long: predictions are off by a half now and then, and a second is the limit. */
export const mostPredicted = 600;
/** Problems whose best method turns out to take longer than this are dropped. Milliseconds. */
export const mostMeasured = 1000;

const resultBytes = ({ horizontal, vertical, channels, request }: Problem): number =>
  horizontal.count * vertical.count * channels * arrays[request.output.sample].BYTES_PER_ELEMENT;

/** A problem for its methods to be compared on; nothing where there is no choice, or where all of them take too long. */
export function candidateAt(index: number, build: Build, profile: HardwareProfile): Candidate | undefined {
  const problem = problemAt(index);
  const kernel = freshKernel(problem.taps);
  const planning = planningProblem(problem, kernel, build);
  const planned = plannedFor(planning).filter(({ barred }) => !barred);
  if (planned.length < 2) return undefined;
  planned.sort((a, b) => predictedRun(a, profile) - predictedRun(b, profile));
  return predictedRun(planned[0]!, profile) <= mostPredicted ? { problem, kernel, planned, resultBytes: resultBytes(planning) } : undefined;
}

/** The first of all problems that take part. */
export function candidates(build: Build, profile: HardwareProfile, count = candidateCount): Candidate[] {
  const found: Candidate[] = [];
  for (let index = 0; found.length < count; index += 1) {
    const candidate = candidateAt(index, build, profile);
    if (candidate) found.push(candidate);
  }
  return found;
}
