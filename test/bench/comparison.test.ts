import { describe, expect, test } from "vitest";
import { compareResults, halfWidth, spreadsOf, verdictOf } from "../../bench/comparison.js";
import { spreadOf, type Spread } from "../../bench/spread.js";
import { noise } from "../support/noise.js";

const spread = (median: number, range = 0.1, samples = 25): Spread => ({
  median,
  p25: median - range / 2,
  p75: median + range / 2,
  fastest: median - range,
  samples,
});

const file = (...rows: [string, Spread][]) => ({
  what: "cases",
  host: { processor: "P" },
  rows: rows.map(([name, milliseconds]) => ({ case: name, build: "simd", milliseconds })),
});

describe("the rule", () => {
  test("a median's interval is the notch of a box plot", () => {
    expect(halfWidth(spread(10, 2, 100))).toBeCloseTo((1.57 * 2) / 10, 12);
  });

  test("medians that differ by more than their intervals and 3 % have changed, in either direction", () => {
    expect(verdictOf(spread(10), spread(9))).toBe("faster");
    expect(verdictOf(spread(9), spread(10))).toBe("slower");
  });

  test("less than 3 % is noise however narrow the intervals are", () => {
    expect(verdictOf(spread(10, 0.001), spread(10.29, 0.001))).toBe("within the noise");
    expect(verdictOf(spread(10, 0.001), spread(10.31, 0.001))).toBe("slower");
  });

  test("intervals that overlap are noise however far the medians are apart", () => {
    expect(verdictOf(spread(10, 8, 16), spread(15, 8, 16))).toBe("within the noise");
    expect(verdictOf(spread(10, 8, 400), spread(15, 8, 400))).toBe("slower");
  });

  test("a handful of samples decides nothing", () => {
    expect(verdictOf(spread(10, 0.1, 4), spread(1, 0.1, 400))).toBe("too few samples");
  });

  test("two halves of the same measurements seldom differ: at most one time in twenty, by construction", () => {
    const draw = noise(5);
    // Sums of twelve uniform numbers are near enough to normal ones (common practice).
    const normal = (): number => Array.from({ length: 12 }, draw).reduce((sum, one) => sum + one, 0) - 6;
    const times = (): Spread => spreadOf(Array.from({ length: 25 }, () => 10 + 2 * normal()));
    const told = Array.from({ length: 400 }, () => verdictOf(times(), times())).filter((verdict) => verdict !== "within the noise").length;
    expect(told).toBeLessThanOrEqual(400 / 20);
  });
});

describe("two files", () => {
  test("a file compared with itself has not changed", () => {
    const one = file(["a", spread(1)], ["b", spread(2)]);
    const { changes, onlyBefore, onlyAfter } = compareResults(one, one);
    expect(changes.map(({ verdict, ratio }) => [verdict, ratio])).toEqual([
      ["within the noise", 1],
      ["within the noise", 1],
    ]);
    expect([onlyBefore, onlyAfter]).toEqual([[], []]);
  });

  test("cases are matched by name in any order, largest change first, and those without a partner are named", () => {
    const before = file(["a", spread(10)], ["b", spread(20)], ["gone", spread(1)]);
    const after = file(["new", spread(1)], ["b", spread(10)], ["a", spread(11)]);
    const { changes, onlyBefore, onlyAfter } = compareResults(before, after);
    expect(changes.map(({ name, ratio, verdict }) => [name, ratio, verdict])).toEqual([
      ["b · simd", 0.5, "faster"],
      ["a · simd", 1.1, "slower"],
    ]);
    expect(onlyBefore).toEqual(["gone · simd"]);
    expect(onlyAfter).toEqual(["new · simd"]);
  });

  test("sides of a contest are told apart by their own names", () => {
    const contest = { work: "box", subject: { name: "ours", milliseconds: spread(1) }, rivals: [{ name: "C words", milliseconds: spread(2) }] };
    expect([...spreadsOf({ groups: { box: { contests: [contest] } } }).keys()]).toEqual(["box · ours", "box · C words"]);
  });

  test("what describes the host is no case", () => {
    expect(spreadsOf({ host: { milliseconds: spread(1) } }).size).toBe(0);
  });
});
