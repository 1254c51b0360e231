import { quantile } from "simple-statistics";
import type { Method } from "../../src/index.js";
import { halfWidth } from "../comparison.js";
import type { Spread } from "../spread.js";

/** A method that takes longer than this many times the best so far is stopped: it has lost. */
export const lostAt = 3;

/** Repeated times, as short as a file of hundreds of problems wants them. */
export type Times = Omit<Spread, "fastest">;

export const timesOf = ({ median, p25, p75, samples }: Times): Times => ({ median, p25, p75, samples });

/** How long a method took on a problem: repeated, or at least so long that it was stopped. Milliseconds. */
export type Took = { milliseconds: Times } | { atLeast: number };

export type MethodTook = { method: Method } & Took;

export const wasStopped = (took: Took): took is { atLeast: number } => "atLeast" in took;

/** The median, or what it took at least. */
export const typical = (took: Took): number => (wasStopped(took) ? took.atLeast : took.milliseconds.median);

export const hasLost = (milliseconds: number, best: number): boolean => milliseconds > lostAt * best;

/** Medians that are nearer to each other than their intervals are wide. */
export function withinNoise(a: Took, b: Took): boolean {
  if (wasStopped(a) || wasStopped(b)) return false;
  return Math.abs(a.milliseconds.median - b.milliseconds.median) <= halfWidth(a.milliseconds) + halfWidth(b.milliseconds);
}

/** The fastest of those that were timed to the end; of all where none was. */
export function bestOf<T extends Took>(all: readonly T[]): T {
  const timed = all.filter((one) => !wasStopped(one));
  return (timed.length > 0 ? timed : all).reduce((best, one) => (typical(one) < typical(best) ? one : best));
}

/** time ÷ time of the best − 1; 0 where the two are nearer than noise. */
export function regretOf<T extends Took>(chosen: T, all: readonly T[]): number {
  const best = bestOf(all);
  return chosen === best || withinNoise(chosen, best) ? 0 : typical(chosen) / typical(best) - 1;
}

export interface RegretSummary {
  problems: number;
  median: number;
  mean: number;
  p90: number;
  p95: number;
  p99: number;
  worst: number;
}

export function summaryOf(regrets: readonly number[]): RegretSummary {
  const at = (part: number): number => quantile([...regrets], part);
  const mean = regrets.reduce((sum, regret) => sum + regret, 0) / regrets.length;
  return { problems: regrets.length, median: at(0.5), mean, p90: at(0.9), p95: at(0.95), p99: at(0.99), worst: Math.max(...regrets) };
}

/** How choices differ from one profile to the next. */
export interface Agreement {
  /** Part of the problems on which not all profiles choose the same. */
  changed: number;
  /** Part of the problems on which one profile chooses otherwise than another, on average over all pairs. */
  changedByPairs: number;
  /** Of those the largest time of a choice ÷ that of another − 1, 0 where nearer than noise. */
  apart: number;
}

/** @param choices for each problem what each profile chose */
export function agreementOf(choices: readonly (readonly MethodTook[])[]): Agreement {
  const share = (part: number): number => part / choices.length;
  const differing = choices.filter((chosen) => new Set(chosen.map(({ method }) => method)).size > 1);
  return {
    changed: share(differing.length),
    changedByPairs: share(choices.reduce((sum, chosen) => sum + differingPairs(chosen), 0)),
    apart: Math.max(0, ...differing.map(widestPair)),
  };
}

/** Of all pairs of choices the part that differs. */
function differingPairs(chosen: readonly MethodTook[]): number {
  const pairs = chosen.flatMap((one, index) => chosen.slice(index + 1).map((other) => one.method !== other.method));
  return pairs.filter(Boolean).length / pairs.length;
}

/** The largest time of a choice ÷ that of another − 1; 0 where nearer than noise. */
export function widestPair(chosen: readonly MethodTook[]): number {
  const slowest = chosen.reduce((most, one) => (typical(one) > typical(most) ? one : most));
  const quickest = chosen.reduce((least, one) => (typical(one) < typical(least) ? one : least));
  return withinNoise(slowest, quickest) ? 0 : typical(slowest) / typical(quickest) - 1;
}
