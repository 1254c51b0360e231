import { operationNames, priceOf, type Counts, type Prices } from "../planning/cost.js";
import type { Gram } from "./leastSquares.js";

/** An experiment that has not been made, as far as choosing it goes. */
export interface Option {
  counts: Counts;
}

/** What an experiment costs beside its samples: preparing it and warming it up. */
const fixedMilliseconds = 2;

/** Standard error that an experiment is expected to have, as a share of its time: what counts times prices leave unexplained, and noise. */
const expectedError = 0.07;

const sharesOf = (counts: Counts, prices: Prices): Float64Array => {
  // What costs nothing has no shares, and tells nothing.
  const total = priceOf(counts, prices) || 1;
  return Float64Array.from(operationNames, (name) => ((counts[name] ?? 0) * prices[name]) / total);
};

function times({ side, values }: Gram, row: Float64Array): Float64Array {
  const product = new Float64Array(side);
  for (let i = 0; i < side; i++) for (let j = 0; j < side; j++) product[i]! += values[i * side + j]! * row[j]!;
  return product;
}

const dot = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, k) => sum + value * b[k]!, 0);

/** The option that is worth most so far. */
interface Best {
  index: number;
  worth: number;
  /** Σ·x */
  pull: Float64Array;
  variance: number;
}

/** What is known after one more experiment, whatever it shows: Σ − Σ·x·xᵀ·Σ / (σ² + xᵀ·Σ·x). */
function after({ side, values }: Gram, pull: Float64Array, variance: number): Gram {
  const next = values.slice();
  for (let i = 0; i < side; i++) for (let j = 0; j < side; j++) next[i * side + j]! -= (pull[i]! * pull[j]!) / variance;
  return { side, values: next };
}

/**
 * The experiments that are worth most for the time they take, one after the other: each lowers the mean variance of the predictions of all targets
 * by most a millisecond. For prices whose ratios have the covariance Σ, and experiments whose predicted time falls into the shares x,
 *
 *     gain(x) = Σ_t (tᵀ·Σ·x)² / (σ² + xᵀ·Σ·x)
 *
 * Source    Box & Draper's I-optimality, sequentially; for instance Atkinson, Donev & Tobias, Optimum Experimental Designs, with SAS, 2007, ch. 10
 * @param options those left to choose from
 * @param targets what predictions should be good for
 * @param sampleMilliseconds how long the samples of one take whose run lasts so long
 * @returns indices of options, fewer where no more are left
 */
export function mostInformative(
  options: readonly Option[],
  targets: readonly Option[],
  { prices, covariance }: { prices: Prices; covariance: Gram },
  count: number,
  sampleMilliseconds: (run: number) => number,
): number[] {
  const aims = targets.map((target) => sharesOf(target.counts, prices));
  const rows = options.map((option) => sharesOf(option.counts, prices));
  const costs = options.map(({ counts }) => fixedMilliseconds + sampleMilliseconds(priceOf(counts, prices) / 1e6));
  const chosen: number[] = [];
  let known = covariance;
  while (chosen.length < Math.min(count, options.length)) {
    let best: Best = { index: -1, worth: -1, pull: new Float64Array(), variance: 1 };
    for (const [index, row] of rows.entries()) {
      if (chosen.includes(index)) continue;
      const pull = times(known, row);
      const variance = expectedError * expectedError + dot(row, pull);
      const worth = aims.reduce((sum, aim) => sum + dot(aim, pull) ** 2, 0) / variance / costs[index]!;
      if (worth > best.worth) best = { index, worth, pull, variance };
    }
    chosen.push(best.index);
    known = after(known, best.pull, best.variance);
  }
  return chosen;
}
