import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { kernel } from "../../src/index.js";
import { problemOf, type Problem } from "../../src/planning/problem.js";
import { planTiles } from "../../src/planning/tiles.js";
import type { Channels } from "../../src/types.js";

function problem(width: number, height: number, channels: Channels, m: number, n: number): Problem {
  return problemOf(
    {
      kernel: kernel(Array.from({ length: n }, () => new Array<number>(m).fill(1))),
      correlate: false,
      width,
      height,
      channels,
      sample: "f32",
      rows: "zero",
      columns: "zero",
      extent: "same",
      region: { x: 0, y: 0, width, height },
      method: "fft",
      tolerance: 0,
      alpha: "none",
      light: "encoded",
      output: { sample: "f32", gain: 1, offset: 0 },
    },
    "simd",
    Infinity,
  );
}

/** All tilings are tried, one by one, once the cheapest is said not to fit; the first answer is then withdrawn. */
function exhaustive(one: Problem): ReturnType<typeof planTiles> {
  let asked = 0;
  return planTiles(one, () => asked++ > 0);
}

const side = fc.oneof(fc.integer({ min: 1, max: 64 }), fc.integer({ min: 65, max: 9000 }));
const taps = fc.oneof(fc.integer({ min: 1, max: 31 }), fc.integer({ min: 32, max: 600 }));
const channels = fc.constantFrom<Channels>(1, 2, 3, 4);

describe("the tiling of the FFT", () => {
  test("is the cheapest of all, though not all are tried", () => {
    fc.assert(
      fc.property(side, side, channels, taps, taps, (width, height, count, m, n) => {
        const one = problem(width, height, count, m, n);
        expect(planTiles(one, () => true)).toEqual(exhaustive(one));
      }),
      { numRuns: 150 },
    );
  });

  test("is none where the kernel is longer than the longest transform", () => {
    expect(planTiles(problem(64, 64, 1, 1, 4096), () => true)).toBeDefined();
    expect(planTiles(problem(64, 64, 1, 1, 4097), () => true)).toBeUndefined();
    expect(planTiles(problem(64, 64, 1, 4093, 1), () => true)).toBeDefined();
    expect(planTiles(problem(64, 64, 1, 4094, 1), () => true)).toBeUndefined();
  });
});
