import { fcnnlsVector } from "ml-fcnnls";
import type { Counts, Operation, Prices } from "../../src/planning/cost.js";

/** Something that was timed: what it counts, how long it took, and how much of that the prices must explain. */
export interface Observation {
  counts: Counts;
  nanoseconds: number;
  target: number;
}

/**
 * Prices p ≥ 0 that minimise the sum of squared relative errors
 *
 *     Σ ((Σ_k counts[o, k] · p[k] − target[o]) / time[o])²   over all observations o
 *
 * by non-negative least squares; every column is brought to length 1 first, as counts differ by many powers of ten.
 *
 * Source    Lawson & Hanson, Solving Least Squares Problems, ch. 23 (the problem); Van Benthem & Keenan, J. Chemometrics 18: 441, 2004 (the solver's method)
 */
export function fitPrices(observations: readonly Observation[], names: readonly Operation[]): Partial<Prices> {
  const rows = observations.map(({ counts, nanoseconds }) => names.map((name) => (counts[name] ?? 0) / nanoseconds));
  const lengths = names.map((_, column) => Math.sqrt(rows.reduce((sum, row) => sum + row[column]! * row[column]!, 0)));
  const used = [...names.keys()].filter((column) => lengths[column]! > 0);
  const scaled = rows.map((row) => used.map((column) => row[column]! / lengths[column]!));
  const targets = observations.map(({ target, nanoseconds }) => target / nanoseconds);
  const solution = fcnnlsVector(scaled, targets, { maxIterations: 1000, gradientTolerance: 1e-12 }).K.to1DArray();
  requireOptimal(scaled, targets, solution);
  return Object.fromEntries(used.map((column, k) => [names[column]!, solution[k]! / lengths[column]!]));
}

/** The solver stops silently after its last iteration: the Kuhn–Tucker conditions tell whether it arrived (Lawson & Hanson, (23.3)). */
function requireOptimal(rows: readonly number[][], targets: readonly number[], solution: readonly number[]): void {
  const residuals = rows.map((row, o) => targets[o]! - row.reduce((sum, value, k) => sum + value * solution[k]!, 0));
  for (const [k, value] of solution.entries()) {
    const gradient = rows.reduce((sum, row, o) => sum + row[k]! * residuals[o]!, 0);
    if (value < 0 || gradient > 1e-6 || (value > 0 && gradient < -1e-6)) throw new Error(`no least squares: price ${k} is ${value} with gradient ${gradient}`);
  }
}
