import { describe, expect, it } from "vitest";
import { pointSpread, pointSpreadWidth } from "../../bench/demo/pointSpread.js";

/**
 * The pivots of an elimination that always takes the largest remaining tap, in order: as many are not 0 as the matrix has
 * rank (common practice: Gaussian elimination with complete pivoting).
 */
function pivots(taps: Float64Array, columns: number, count: number): number[] {
  const rest = Float64Array.from(taps);
  const rows = rest.length / columns;
  return Array.from({ length: count }, () => {
    const place = rest.reduce((best, tap, index) => (Math.abs(tap) > Math.abs(rest[best]) ? index : best), 0);
    const pivot = rest[place];
    const [pivotRow, pivotColumn] = [Math.floor(place / columns), place % columns];
    const row = rest.slice(pivotRow * columns, (pivotRow + 1) * columns);
    const column = Array.from({ length: rows }, (_, j) => rest[j * columns + pivotColumn]);
    for (let j = 0; j < rows; j++) for (let i = 0; i < columns; i++) rest[j * columns + i] -= (column[j] * row[i]) / pivot;
    return Math.abs(pivot);
  });
}

describe("the point spread of the old lens", () => {
  const kernel = pointSpread();
  const taps = kernel.taps;

  it("is 65 × 65 taps, all positive, with sum 1 within a rounding of double precision a tap", () => {
    expect([kernel.width, kernel.height]).toEqual([pointSpreadWidth, pointSpreadWidth]);
    expect(Math.min(...taps)).toBeGreaterThan(0);
    expect(Math.abs(taps.reduce((sum, tap) => sum + tap, 0) - 1)).toBeLessThan(taps.length * Number.EPSILON);
  });

  it("is no sum of few outer products: sixteen pivots are above a hundredth of the first", () => {
    const found = pivots(taps, kernel.width, 17);
    expect(found[16]).toBeGreaterThan(found[0] / 100);
  });

  it("is lopsided: its centre of mass lies off the middle, and a half turn changes it", () => {
    const turned = taps.toReversed();
    const difference = taps.reduce((sum, tap, index) => sum + Math.abs(tap - turned[index]), 0);
    expect(difference).toBeGreaterThan(0.5);
  });

  it("is the same taps each time", () => {
    expect(pointSpread().taps).toEqual(taps);
  });

  it("finds rank 1 in an outer product, so that the count above can fail", () => {
    const outer = Float64Array.from({ length: 25 }, (_, index) => (1 + Math.floor(index / 5)) * (2 + (index % 5)));
    expect(pivots(outer, 5, 2)[1]).toBeLessThan(1e-14 * 30);
  });
});
