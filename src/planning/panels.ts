import type { Counts, Operation } from "./cost.js";
import type { MethodPlan, Work } from "./method.js";
import { cutAxis, type Problem } from "./problem.js";

/**
 * Engine memory that a filter takes without need, 64 MiB. Rings and planes are as wide as the image; where they would take more, results
 * are computed panel by panel, one after the other in the same memory. A panel is a region, so no byte of a sum changes.
 */
const comfortableBytes = 67_108_864;

/** Narrower panels than this would enter mostly halo. */
const narrowest = 64;

/**
 * Multiply–adds that one call may take: 10 ms at what SIMD builds reach on the slower of the machines measured. Where two whole rows take more, narrower
 * panels do, down to the narrowest.
 */
const mostPerCall = 80_000_000;

/** How a method cuts a problem: problems of one width side by side, the last one flush with the edge, and the work of all. */
export interface Panels {
  problems: Problem[];
  work: Work;
}

function panel(problem: Problem, start: number, count: number, bytesAvailable: number): Problem {
  return { ...problem, whole: problem.whole ?? problem, column: start, horizontal: cutAxis(problem.horizontal, start, count), bytesAvailable };
}

/** The first panel's work stands for all, being of one width; the memory is that of the neediest: one inside stages more columns than one at the edge. */
interface Cut {
  width: number;
  first: Problem;
  work: Work;
}

function* cuts(plan: MethodPlan, problem: Problem): Generator<Cut> {
  const columns = problem.horizontal.count;
  const bytesAvailable = Math.min(problem.bytesAvailable, comfortableBytes);
  for (let count = 1; ; count *= 2) {
    const width = Math.ceil(columns / count);
    const first = panel(problem, 0, width, bytesAvailable);
    const work = plan.work(first);
    const others = count === 1 ? [] : [Math.min(width, columns - width), columns - width].map((start) => panel(problem, start, width, bytesAvailable));
    yield { width, first, work: { ...work, bytes: others.reduce((most, other) => Math.max(most, plan.work(other).bytes), work.bytes) } };
    if (width <= narrowest) return;
  }
}

/** The fewest panels that are comfortable in memory and time, else the fewest that fit, else those that need least. */
function bestCut(plan: MethodPlan, problem: Problem): Cut {
  let fitting: Cut | undefined;
  let least: Cut | undefined;
  for (const cut of cuts(plan, problem)) {
    const short = (cut.work.leastCall ?? 0) <= mostPerCall || cut.width <= narrowest;
    if (short && cut.work.bytes <= cut.first.bytesAvailable) return cut;
    if (!fitting && cut.work.bytes <= problem.bytesAvailable) fitting = cut;
    if (!least || cut.work.bytes < least.work.bytes) least = cut;
  }
  return fitting ?? least!;
}

/** Several panels set themselves up again at every run: what that takes besides tables counts with the run. */
function workOfAll({ setup, run, bytes }: Work, panels: number): Work {
  if (panels === 1) return { setup, run, bytes };
  const all: Counts = {};
  for (const [name, count] of Object.entries(run) as [Operation, number][]) all[name] = count * (name === "run" ? 1 : panels);
  for (const name of ["columnPass", "rowPass"] as const) if (setup[name]) all[name] = (all[name] ?? 0) + panels * setup[name];
  return { setup, run: all, bytes };
}

const known = new WeakMap<Problem, Map<MethodPlan, Panels>>();

/** Cuts a problem for a method that applies to it. */
export function panelsOf(plan: MethodPlan, problem: Problem): Panels {
  const cut = known.get(problem)?.get(plan);
  if (cut) return cut;
  const { width, first, work } = bestCut(plan, problem);
  const columns = problem.horizontal.count;
  const starts = Array.from({ length: Math.ceil(columns / width) }, (_, k) => Math.min(k * width, columns - width));
  const problems = starts.map((start) => (start === 0 ? first : panel(problem, start, width, first.bytesAvailable)));
  const panels = { problems, work: workOfAll(work, problems.length) };
  if (!known.has(problem)) known.set(problem, new Map());
  known.get(problem)!.set(plan, panels);
  return panels;
}
