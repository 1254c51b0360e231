import { operationNames, type Counts, type Prices } from "../planning/cost.js";
import { groups } from "./groups.js";
import { addRow, gramOf, inverseOf, logDeterminant, nonNegativeSolution, type Gram } from "./leastSquares.js";

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
  /** What that would be had nothing been observed. */
  unobserved: number;
  /** Covariance of price ratios: `prices` times 1 + δ, δ's covariance. Operations in the order of planning/cost. */
  covariance: Gram;
}

/** How far a price may stray from its group's, and a group from all, on quite another machine: as shares (standard deviations). */
const stray = { price: 0.4, group: 0.6, all: 30 };
/** On a machine like the known one they stray less: these parts of it are tried, and the likeliest is taken. */
const strayParts = [1, 0.5, 0.25, 0.12];

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
function kinship(levels: Float64Array, part: number): { gram: Gram; right: Float64Array; kins: Kin[] } {
  const gram = gramOf(unknownCount);
  const right = new Float64Array(unknownCount);
  const level = (k: number): number => Math.max(levels[k]!, leastLevel);
  const kins: Kin[] = [];
  const add = (a: number, b: number, deviation: number): void => {
    const row = new Float64Array(unknownCount);
    row[a] = 1;
    row[b] = -1;
    kins.push({ a, b, deviation });
    addRow(gram, row, 1 / (deviation * deviation));
  };
  for (let k = 0; k < operationCount; k++) add(k, operationCount + groupOf[k]!, part * stray.price * level(operationCount + groupOf[k]!));
  for (let g = 0; g < groups.length; g++) add(operationCount + g, allIndex, part * stray.group * level(allIndex));
  const weight = 1 / (stray.all * stray.all);
  gram.values[allIndex * unknownCount + allIndex]! += weight;
  right[allIndex]! += weight;
  return { gram, right, kins };
}

/** Two ratios that should be alike. */
interface Kin {
  a: number;
  b: number;
  deviation: number;
}

/** Rows with the standard deviation of each. */
interface Rows {
  shares: Float64Array[];
  deviations: number[];
}

interface Solution {
  /** How far prices stray. */
  part: number;
  ratios: Float64Array;
  gram: Gram;
  /** −2 log of how likely the observations are, up to a constant, whatever the prices: small is likely. */
  surprise: number;
}

const errorsOf = ({ shares: rows }: Rows, ratios: Float64Array): number[] =>
  rows.map((row) => {
    let sum = -1;
    for (let k = 0; k < unknownCount; k++) sum += row[k]! * ratios[k]!;
    return sum;
  });

/**
 * Ratios for strays of a given size, and how well they go with the observations: the evidence of a linear model with normal errors,
 *
 *     −2 log p = Σ weight · error² + Σ (difference of kin / stray)² + log |A| − log |A of kin alone|
 *
 * Source    MacKay, Bayesian interpolation, Neural Computation 4: 415, 1992, §4
 */
function solve(rows: Rows, part: number): Solution {
  let ratios = new Float64Array(unknownCount).fill(1);
  let errors = rows.shares.map(() => 0);
  let gram = gramOf(unknownCount);
  let surprise = 0;
  for (let pass = 0; pass < (errors.length > 0 ? reweightings : 1); pass++) {
    const kin = kinship(ratios, part);
    const ofKin = logDeterminant(kin.gram);
    gram = kin.gram;
    const weights = rows.deviations.map((deviation, o) => 1 / (deviation * deviation * Math.max(1, Math.abs(errors[o]!) / (outlying * deviation))));
    for (const [o, row] of rows.shares.entries()) {
      addRow(gram, row, weights[o]!);
      for (let k = 0; k < unknownCount; k++) kin.right[k]! += weights[o]! * row[k]!;
    }
    ratios = Float64Array.from(nonNegativeSolution(gram, kin.right));
    errors = errorsOf(rows, ratios);
    const misfit = errors.reduce((sum, error, o) => sum + weights[o]! * error * error, 0);
    const strayed = kin.kins.reduce((sum, { a, b, deviation }) => sum + ((ratios[a]! - ratios[b]!) / deviation) ** 2, 0);
    surprise = misfit + strayed + logDeterminant(gram) - ofKin;
  }
  return { part, ratios, gram, surprise };
}

/**
 * Prices p ≥ 0 that make the sum of squared relative errors
 *
 *     Σ ((Σ_k counts[o, k] · p[k]) / time[o] − 1)² / σ[o]²   over all observations o
 *
 * small together with how far prices stray from the ratios of a known profile: what few experiments cannot separate keeps its proportion, and the
 * observations themselves tell how far prices stray. Non-negative least squares; large errors weigh less.
 *
 * @param known prices of some machine
 * @param thorough false where a rough answer will do for now: strays are not tried
 */
export function estimate(observations: readonly Observation[], known: Prices, thorough = true): Estimate {
  const scale = median(observations.map((one) => 1 / shares(one, unitsOf(known, 1)).reduce((sum, share) => sum + share, 0)));
  const units = unitsOf(known, scale);
  const rows = {
    shares: observations.map((one) => shares(one, units)),
    deviations: observations.map(({ noise }) => Math.hypot(modelError, noise)),
  };
  const parts = thorough && observations.length > 0 ? strayParts : [1];
  const { part, ratios, gram } = parts.map((one) => solve(rows, one)).reduce((best, one) => (one.surprise < best.surprise ? one : best));
  return { ...estimateFrom(ratios, units, inverseOf(gram)), unobserved: part * Math.hypot(stray.price, stray.group) };
}

function unitsOf(known: Prices, scale: number): Float64Array {
  return Float64Array.from(operationNames, (name) => scale * Math.max(known[name], leastPrice));
}

function estimateFrom(solution: Float64Array, units: Float64Array, inverse: Gram): Omit<Estimate, "unobserved"> {
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
