import { describe, expect, test } from "vitest";
import { diskCoverage } from "../../src/math/diskCoverage.js";

/** Σ over all squares that the disk meets. */
function wholeArea(radius: number): number {
  const reach = Math.ceil(radius + 0.5);
  let area = 0;
  for (let y = -reach; y <= reach; y++) {
    for (let x = -reach; x <= reach; x++) area += diskCoverage(Math.abs(x), Math.abs(y), radius);
  }
  return area;
}

/** The definition by the midpoint rule on strips: the part of each strip of the square that lies in the disk. */
function coverageByStrips(x: number, y: number, radius: number, strips: number): number {
  let area = 0;
  for (let k = 0; k < strips; k++) {
    const t = y - 0.5 + (k + 0.5) / strips;
    const half = Math.abs(t) < radius ? Math.sqrt(radius * radius - t * t) : 0;
    area += Math.max(0, Math.min(x + 0.5, half) - Math.max(x - 0.5, -half)) / strips;
  }
  return area;
}

describe("diskCoverage", () => {
  test.each([0.2, 0.5, 0.6, Math.SQRT1_2, 1, 1.5, 2.5, 3.3, 8, 57.25, 300])("sums to πR² for R = %d (Archimedes)", (radius) => {
    expect(Math.abs(wholeArea(radius) / (Math.PI * radius * radius) - 1)).toBeLessThan(1e-14);
  });

  test.each([0.6, 0.75, 1, 2.5, 8])("agrees with its definition square by square for R = %d", (radius) => {
    const strips = 4000;
    // Where the circle turns back its half width is √(2R·d) at depth d; the midpoint rule misses the like of one strip of that.
    const tolerance = Math.sqrt(2 * radius) / strips ** 1.5;
    for (let y = 0; y <= 9; y++) {
      for (let x = 0; x <= 9; x++) {
        expect(Math.abs(diskCoverage(x, y, radius) - coverageByStrips(x, y, radius, strips)), `${x}, ${y}`).toBeLessThan(tolerance);
      }
    }
  });

  test("is 1 inside, 0 outside and exact for a circle inscribed in the square", () => {
    expect(diskCoverage(0, 0, 5)).toBe(1);
    expect(diskCoverage(3, 3, 5)).toBe(1);
    expect(diskCoverage(4, 5, 5)).toBe(0);
    expect(diskCoverage(0, 0, 0.5)).toBeCloseTo(Math.PI / 4, 15);
  });
});
