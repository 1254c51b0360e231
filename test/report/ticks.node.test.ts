import { describe, expect, test } from "vitest";
import { apart, flags } from "../../src/report/chart/placing.js";
import { sizeTicks, timeTicks, withRoom } from "../../src/report/chart/ticks.js";

describe("times that an axis names", () => {
  test.each<[string, number, number, number, number[]]>([
    ["two decades", 0.9, 110, 10, [1, 2, 5, 10, 20, 50, 100]],
    ["four decades", 0.9, 11_000, 8, [1, 10, 100, 1000, 10_000]],
    ["three decades", 0.9, 1100, 8, [1, 3, 10, 30, 100, 300, 1000]],
    ["between 2 and 5", 2.1, 4.9, 10, [2.4, 2.8, 3.2, 3.6, 4, 4.5]],
    ["from 2 to 9", 2.1, 9.1, 10, [3, 4, 6, 8]],
    ["below a microsecond", 0.00009, 0.0011, 10, [0.0001, 0.0002, 0.0005, 0.001]],
  ])("%s", (_, low, high, most, ticks) => {
    expect(timeTicks(low, high, most)).toEqual(ticks);
  });

  test("there are at least two, and few enough, whatever the range", () => {
    for (let low = 1e-6; low < 1e4; low *= 1.37)
      for (let high = low * 1.44; high < 1e6; high *= 2.3) {
        const ticks = timeTicks(low, high, 8);
        expect(ticks.length, `${low} … ${high}`).toBeGreaterThanOrEqual(2);
        expect(ticks.length, `${low} … ${high}`).toBeLessThanOrEqual(8);
        expect(ticks).toEqual(ticks.toSorted((a, b) => a - b));
        for (const tick of ticks) expect(tick >= low && tick <= high).toBe(true);
      }
  });
});

describe("sizes that an axis names", () => {
  test("usual ones, or the ends of what was measured", () => {
    expect(sizeTicks(2.8, 136, [3, 127])).toEqual([3, 5, 9, 15, 31, 63, 127]);
    expect(sizeTicks(16, 24, [17, 19, 23])).toEqual([17, 23]);
    expect(sizeTicks(18, 20, [19])).toEqual([19]);
    expect(sizeTicks(2, 4, [])).toEqual([3]);
  });

  test("only as many as have room, the last one surely", () => {
    expect(withRoom([3, 5, 9, 15], (size) => 10 * size, 30)).toEqual([5, 9, 15]);
    expect(withRoom([3, 5, 9, 15], (size) => 10 * size, 200)).toEqual([15]);
    expect(withRoom([], (size) => size, 30)).toEqual([]);
  });
});

describe("labels keep out of each other's way", () => {
  test("those beside lines are moved apart, in their order, and stay inside", () => {
    const places = apart(
      [50, 48, 10, 99].map((at) => ({ at, extent: 12 })),
      [0, 100],
    );
    expect(places).toEqual([60, 48, 10, 94]);
  });

  test("flags begin at their poles, in the first row with room, and stay inside", () => {
    const poles = [
      { at: 10, extent: 50 },
      { at: 30, extent: 50 },
      { at: 70, extent: 20 },
      { at: 90, extent: 40 },
    ];
    expect(flags(poles, [0, 100], 5)).toEqual([
      { row: 0, start: 10, end: 60 },
      { row: 1, start: 30, end: 80 },
      { row: 0, start: 70, end: 90 },
      { row: 2, start: 60, end: 100 },
    ]);
  });
});
