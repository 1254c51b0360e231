import { describe, expect, test } from "vitest";
import { workOf } from "../../src/api/work.js";
import { estimate, type Observation } from "../../src/measure/estimate.js";
import { experiments } from "../../src/measure/experiments.js";
import { groups } from "../../src/measure/groups.js";
import { operationNames, priceOf, type Counts, type Prices } from "../../src/planning/cost.js";
import { shippedProfiles } from "../../src/planning/profile.js";
import type { Build } from "../../src/types.js";
import { chance, quantile, type Chance } from "./chance.js";

const fits = 12;
const ofThreads = ["handOver", "meeting", "handedByte"] as const;

const knownOf = (build: Build): Prices => shippedProfiles.find((profile) => profile.build === build)!.nanoseconds as Prices;

const countsOf = (build: Build): Counts[] =>
  [...experiments()].map(({ options, kernel, layout }) => workOf(options.method, build, kernel, layout, options)!.run);

/** Another machine: each group of prices 0.3 … 8 times the known one, each price within its group 0.7 … 1.4 times that. */
function otherMachine(known: Prices, { between }: Chance): Prices {
  const entries = groups.flatMap((group) => {
    const factor = between(0.3, 8);
    return group.map((name) => [name, Math.max(known[name], 0.01) * factor * between(0.7, 1.4)] as const);
  });
  return Object.fromEntries(entries) as Prices;
}

/** Times with 3 % of noise, one in twenty of them 3 … 10 times too long. */
function timed(counts: readonly Counts[], truth: Prices, { normal, uniform, between }: Chance): Observation[] {
  return counts.map((one) => ({
    counts: one,
    nanoseconds: priceOf(one, truth) * (1 + 0.03 * normal()) * (uniform() < 0.05 ? between(3, 10) : 1),
    noise: 0.03,
  }));
}

const isMeasured = (spread: number): boolean => spread < 0.25;

describe.each(["simd", "scalar"] as const)("prices of the %s build from made-up times with noise and outliers", (build) => {
  const known = knownOf(build);
  const counts = countsOf(build);
  const results = Array.from({ length: fits }, (_, seed) => {
    const dice = chance(100 + seed);
    const truth = otherMachine(known, dice);
    const observations = timed(counts, truth, dice);
    const half = observations.filter((_, index) => index % 2 === 0);
    return { truth, observations, all: estimate(observations, known), half: estimate(half, known) };
  });

  test("those that are told as measured lie within 2.5 spreads of the true ones, 95 in 100", () => {
    const deviations = results.flatMap(({ truth, all: { prices, spread } }) =>
      operationNames.filter((name) => isMeasured(spread[name])).map((name) => Math.abs(Math.log(prices[name] / truth[name])) / spread[name]),
    );
    expect(deviations.length).toBeGreaterThan(15 * fits);
    expect(quantile(deviations, 0.95)).toBeLessThan(2.5);
  });

  test("times are predicted within 2 % in the middle and 6 % in 95 of 100", () => {
    const errors = results.flatMap(({ truth, all: { prices } }) => counts.map((one) => Math.abs(priceOf(one, prices) / priceOf(one, truth) - 1)));
    expect(quantile(errors, 0.5)).toBeLessThan(0.02);
    expect(quantile(errors, 0.95)).toBeLessThan(0.06);
  });

  test("so are those of problems that were not timed, within 3 % and 20 %", () => {
    const unseen = counts.filter((_, index) => index % 2 === 1);
    const errors = results.flatMap(({ truth, half: { prices } }) => unseen.map((one) => Math.abs(priceOf(one, prices) / priceOf(one, truth) - 1)));
    expect(quantile(errors, 0.5)).toBeLessThan(0.03);
    expect(quantile(errors, 0.95)).toBeLessThan(0.2);
  });

  test("a price that no observation has is never told as measured", () => {
    for (const { all } of results) for (const name of ofThreads) expect(isMeasured(all.spread[name])).toBe(false);
  });

  test("no price is negative, none is missing, and all are finite", () => {
    for (const { all, half } of results) {
      for (const { prices, spread } of [all, half]) {
        expect(Object.keys(prices)).toEqual(operationNames);
        for (const name of operationNames) {
          expect(prices[name]).toBeGreaterThanOrEqual(0);
          expect(Number.isFinite(prices[name])).toBe(true);
          expect(spread[name]).toBeGreaterThan(0);
        }
      }
    }
  });

  test("times that are a number of times as long give prices that are as many times as high, and the same spread", () => {
    const { observations, all } = results[0]!;
    for (const factor of [1e-3, 7, 1e4]) {
      const again = estimate(
        observations.map((one) => ({ ...one, nanoseconds: factor * one.nanoseconds })),
        known,
      );
      for (const name of operationNames) {
        expect(Math.abs(again.prices[name] / factor - all.prices[name])).toBeLessThanOrEqual(1e-6 * all.prices[name]);
        expect(Math.abs(again.spread[name] - all.spread[name])).toBeLessThanOrEqual(1e-6 * all.spread[name]);
      }
    }
  });
});

describe("few observations", () => {
  const known = knownOf("simd");
  const counts = countsOf("simd");

  test("none: the prices are the known ones, and none is measured", () => {
    const { prices, spread } = estimate([], known);
    for (const name of operationNames) {
      // A price of 0 becomes 0.02: what has no ratio could not be measured as any other.
      expect(prices[name]).toBeCloseTo(Math.max(known[name], 0.02), 5);
      expect(isMeasured(spread[name])).toBe(false);
    }
  });

  test.each([0.2, 1, 5])("one, of a machine %f times as slow: all prices keep their proportion", (factor) => {
    const { prices } = estimate([{ counts: counts[30]!, nanoseconds: priceOf(counts[30]!, known) * factor, noise: 0.02 }], known);
    for (const name of operationNames) expect(prices[name] / Math.max(known[name], 0.02) / factor).toBeCloseTo(1, 1);
  });

  test("of one group only: the others' proportions among themselves stay", () => {
    const dear = { ...known, directTap: 4 * known.directTap, directEdgeTap: 4 * known.directEdgeTap };
    const direct = counts.filter((one) => (one.directTap ?? 0) > 0);
    const { prices } = estimate(
      direct.map((one) => ({ counts: one, nanoseconds: priceOf(one, dear), noise: 0.02 })),
      known,
    );
    expect(prices.directTap / dear.directTap).toBeCloseTo(1, 1);
    for (const [a, b] of [
      ["columnPass", "rowPass"],
      ["handOver", "meeting"],
      ["integerSum", "floatSum"],
    ] as const)
      expect(prices[a] / prices[b] / (known[a] / known[b])).toBeCloseTo(1, 1);
  });
});
