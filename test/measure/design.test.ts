import { describe, expect, test } from "vitest";
import { mostInformative, type Option } from "../../src/measure/design.js";
import { estimate } from "../../src/measure/estimate.js";
import type { Gram } from "../../src/measure/leastSquares.js";
import { operationNames, priceOf, type Counts, type Operation, type Prices } from "../../src/planning/cost.js";
import { chance } from "./chance.js";

const used: readonly Operation[] = ["run", "row", "directTap", "columnPass"];
const prices = Object.fromEntries(operationNames.map((name, k) => [name, 1 + (k % 3)])) as Prices;

/** Made-up: nobody knows anything, and nothing hangs together but the first two. */
function ignorance(): Gram {
  const side = operationNames.length;
  const values = new Float64Array(side * side);
  for (let k = 0; k < side; k++) values[k * side + k] = 0.09;
  const [a, b] = [operationNames.indexOf("run"), operationNames.indexOf("row")];
  values[a * side + b] = values[b * side + a] = 0.05;
  return { side, values };
}

function madeUp(seed: number, count: number): Option[] {
  const dice = chance(seed);
  return Array.from({ length: count }, () => ({
    counts: Object.fromEntries(used.map((name) => [name, dice.uniform() < 0.4 ? 0 : Math.round(dice.between(1, 1e5))]).concat([["step", 1]])) as Counts,
  }));
}

/** The sum of the variances of all predictions after some experiments: Σ⁻¹ grows by x·xᵀ/σ² with each, put as Σ − Σ·x·xᵀ·Σ/(σ² + xᵀ·Σ·x). */
function variances(experiments: readonly Option[], targets: readonly Option[], covariance: Gram, sigma: number): number {
  const share = ({ counts }: Option): number[] => operationNames.map((name) => ((counts[name] ?? 0) * prices[name]) / priceOf(counts, prices));
  const { side } = covariance;
  let known = Array.from({ length: side }, (_, i) => [...covariance.values.subarray(i * side, (i + 1) * side)]);
  const product = (x: readonly number[]): number[] => known.map((row) => row.reduce((sum, value, j) => sum + value * x[j]!, 0));
  const dot = (a: readonly number[], b: readonly number[]): number => a.reduce((sum, value, k) => sum + value * b[k]!, 0);
  for (const x of experiments.map(share)) {
    const pull = product(x);
    const variance = sigma * sigma + dot(x, pull);
    known = known.map((row, i) => row.map((value, j) => value - (pull[i]! * pull[j]!) / variance));
  }
  return targets.map(share).reduce((sum, x) => sum + dot(x, product(x)), 0);
}

const sameTime = (): number => 5;
/** What design expects of an experiment. */
const sigma = 0.07;

describe("the most informative experiments", () => {
  test.each([1, 2, 3, 4, 5, 6, 7, 8])("each is the one, of all that are left, after which predictions vary least (made-up options %i)", (seed) => {
    const options = madeUp(seed, 9);
    const targets = madeUp(seed + 50, 5);
    const covariance = ignorance();
    const chosen = mostInformative(options, targets, { prices, covariance }, 4, sameTime);
    const before: Option[] = [];
    for (const index of chosen) {
      const after = options.map((option) => variances([...before, option], targets, covariance, sigma));
      const left = after.filter((_, k) => !before.includes(options[k]!));
      expect(after[index]).toBeLessThanOrEqual(Math.min(...left) * (1 + 1e-9));
      before.push(options[index]!);
    }
  });

  test("of two that tell the same the shorter one", () => {
    const long = { counts: { directTap: 1e6, step: 10 } };
    const short = { counts: { directTap: 1e4, step: 0.1 } };
    expect(mostInformative([long, short], [long], { prices, covariance: ignorance() }, 1, (run) => 100 * run)).toEqual([1]);
  });

  test("each once, as many as there are at most", () => {
    const options = madeUp(11, 5);
    const chosen = mostInformative(options, options, { prices, covariance: ignorance() }, 20, sameTime);
    expect(chosen.toSorted()).toEqual([0, 1, 2, 3, 4]);
  });

  test("none where none is left", () => {
    expect(mostInformative([], madeUp(1, 2), { prices, covariance: ignorance() }, 3, sameTime)).toEqual([]);
  });

  test("what seems to cost nothing comes last, and harms nothing", () => {
    const free = { ...prices, step: 0 };
    const options = [{ counts: { step: 5 } }, { counts: { directTap: 5 } }];
    expect(mostInformative(options, options, { prices: free, covariance: ignorance() }, 2, sameTime)).toEqual([1, 0]);
  });

  test("first what nothing is known about: a price that was measured is not measured again", () => {
    const taps = { counts: { directTap: 1e5 } };
    const points = { counts: { columnPass: 1e5 } };
    const observed = Array.from({ length: 5 }, () => ({ counts: taps.counts, nanoseconds: 1e5, noise: 0.01 }));
    expect(mostInformative([taps, points], [taps, points], estimate(observed, prices), 1, sameTime)).toEqual([1]);
  });
});
