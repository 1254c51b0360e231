import type { Problem } from "./problem.js";

/**
 * What does not depend on the taps, made once for a problem and for all that differ from it by their taps alone.
 */
export function remembered<T extends object>(make: (problem: Problem) => T): (problem: Problem) => T {
  const known = new WeakMap<Problem, T>();
  return (problem) => {
    const root = problem.like ?? problem;
    let found = known.get(root);
    if (!found) known.set(root, (found = make(problem)));
    return found;
  };
}
