import { operationNames, type Counts, type Prices } from "../planning/cost.js";
import { groups } from "./groups.js";
import { addRow, gramOf, inverseOf, nonNegativeSolution, type Gram } from "./leastSquares.js";

/** A run that was timed. */
export interface Observation {
  counts: Counts;
  /** Of one run. */
  nanoseconds: number;
  /** Standard error of that time, as a share of it. */
  noise: number;
}

/** What is known of the prices: the likeliest ones and how sure they are. */
export interface Estimate {
  prices: Prices;
  /** Standard error of each price as a share of it. */
  spread: Prices;
  /** Covariance of price ratios: `prices` times 1 + δ, δ's covariance. Operations in the order of planning/cost. */
  covariance: Gram;
}

/** How far a price may stray from its group's, and a group from all, before anything is measured: as shares (standard deviations). */
const stray = { price: 0.4, group: 0.6, all: 30 };

/** What exact counts times constant prices leave unexplained: caches, alignment, branches. As a share of a time (standard deviation). */
const modelError = 0.05;

/** Errors beyond so many standard deviations lose weight, so that a disturbed run does not decide (Huber, Ann. Math. Stat. 35: 73, 1964). */
const outlying = 2;
const reweightings = 4;

/** A ratio below this counts as this where shares of it are taken. */
const leastLevel = 0.05;

const operationCount = operationNames.length;
const groupOf = operationNames.map((name) => groups.findIndex((names) => names.includes(name)));
/** Unknowns: a ratio for each operation, one for each group, one for all. */
const unknownCount = operationCount + groups.length + 1;
const allIndex = unknownCount - 1;

/** A price of 0 has no ratio: it may become as large as a share of the largest price a sample of its machine. */
const leastPrice = 0.02;

const median = (values: readonly number[]): number => {
  const sorted = values.toSorted((a, b) => a - b);
  return sorted.length === 0 ? 1 : (sorted[(sorted.length - 1) >> 1]! + sorted[sorted.length >> 1]!) / 2;
};

/** The terms of a predicted time, as shares of the measured one. */
function shares({ counts, nanoseconds }: Observation, units: Float64Array): Float64Array {
  const row = new Float64Array(unknownCount);
  for (const [k, name] of operationNames.entries()) row[k] = ((counts[name] ?? 0) * units[k]!) / nanoseconds;
  return row;
}

/**
 * Rows that say how prices hang together: ratio = its group's ± stray, group's = that of all ± stray, that of all = anything near 1.
 *
 * @param levels ratios as far as they are known: strays are shares of the group's, or of that of all
 */
function addKinship(gram: Gram, right: Float64Array, levels: Float64Array): void {
  const level = (k: number): number => Math.max(levels[k]!, leastLevel);
  const kin = (a: number, b: number, deviation: number): void => {
    const row = new Float64Array(unknownCount);
    row[a] = 1;
    row[b] = -1;
    addRow(gram, row, 1 / (deviation * deviation));
  };
  for (let k = 0; k < operationCount; k++) kin(k, operationCount + groupOf[k]!, stray.price * level(operationCount + groupOf[k]!));
  for (let g = 0; g < groups.length; g++) kin(operationCount + g, allIndex, stray.group * level(allIndex));
  const weight = 1 / (stray.all * stray.all);
  gram.values[allIndex * unknownCount + allIndex]! += weight;
  right[allIndex]! += weight;
}

/**
 * Prices p ≥ 0 that make the sum of squared relative errors
 *
 *     Σ ((Σ_k counts[o, k] · p[k]) / time[o] − 1)² / σ[o]²   over all observations o
 *
 * small together with how far prices stray from the ratios of a known profile: what few experiments cannot separate keeps its proportion.
 * Non-negative least squares; large errors weigh less.
 *
 * @param known prices of some machine
 */
export function estimate(observations: readonly Observation[], known: Prices): Estimate {
  const scale = median(observations.map((one) => 1 / shares(one, unitsOf(known, 1)).reduce((sum, share) => sum + share, 0)));
  const units = unitsOf(known, scale);
  const rows = observations.map((one) => shares(one, units));
  let errors = observations.map(() => 0);
  let solution = new Float64Array(unknownCount).fill(1);
  let gram = gramOf(unknownCount);
  for (let pass = 0; pass < (observations.length > 0 ? reweightings : 1); pass++) {
    gram = gramOf(unknownCount);
    const right = new Float64Array(unknownCount);
    addKinship(gram, right, solution);
    for (const [o, row] of rows.entries()) {
      const deviation = Math.hypot(modelError, observations[o]!.noise);
      const beyond = Math.abs(errors[o]!) / (outlying * deviation);
      const weight = 1 / (deviation * deviation * Math.max(1, beyond));
      addRow(gram, row, weight);
      for (let k = 0; k < unknownCount; k++) right[k]! += weight * row[k]!;
    }
    solution = Float64Array.from(nonNegativeSolution(gram, right));
    errors = rows.map((row) => row.reduce((sum, share, k) => sum + share * solution[k]!, -1));
  }
  return estimateFrom(solution, units, inverseOf(gram));
}

function unitsOf(known: Prices, scale: number): Float64Array {
  return Float64Array.from(operationNames, (name) => scale * Math.max(known[name], leastPrice));
}

function estimateFrom(solution: Float64Array, units: Float64Array, inverse: Gram): Estimate {
  const pairs = (value: (k: number) => number): Prices => Object.fromEntries(operationNames.map((name, k) => [name, value(k)])) as Prices;
  const ratio = (k: number): number => Math.max(solution[k]!, leastLevel);
  const covariance = gramOf(operationCount);
  for (let i = 0; i < operationCount; i++) {
    for (let j = 0; j < operationCount; j++) covariance.values[i * operationCount + j] = inverse.values[i * unknownCount + j]! / (ratio(i) * ratio(j));
  }
  return {
    prices: pairs((k) => solution[k]! * units[k]!),
    spread: pairs((k) => Math.sqrt(covariance.values[k * operationCount + k]!)),
    covariance,
  };
}
