import { describe, expect, test } from "vitest";
import { compensatedSum } from "../../src/math/compensatedSum.js";
import { editDistance, nearestName } from "../../src/math/nearestName.js";

describe("editDistance", () => {
  test.each([
    ["", "", 0],
    ["border", "border", 0],
    ["", "abc", 3],
    ["kitten", "sitting", 3],
    ["ab", "ba", 1],
    ["sigam", "sigma", 1],
    ["ca", "abc", 3],
  ])("from %j to %j is %i", (from, to, distance) => {
    expect(editDistance(from, to)).toBe(distance);
    expect(editDistance(to, from)).toBe(distance);
  });
});

describe("nearestName", () => {
  const rules = ["replicate", "zero", "periodic", "half-sample-symmetric", "whole-sample-symmetric", "renormalised"];

  test.each([
    ["replicat", "replicate"],
    ["Periodic", "periodic"],
    ["halfSampleSymmetric", "half-sample-symmetric"],
    ["renormalized", "renormalised"],
    ["zeros", "zero"],
    ["rep", "replicate"],
  ])("takes %j for %j", (given, meant) => {
    expect(nearestName(given, rules)).toBe(meant);
  });

  test("suggests nothing where nothing is near", () => {
    expect(nearestName("banana", rules)).toBeUndefined();
    expect(nearestName("", rules)).toBeUndefined();
    expect(nearestName("x".repeat(1_000_000), rules)).toBeUndefined();
  });
});

describe("compensatedSum", () => {
  test("keeps what plain addition loses", () => {
    expect(compensatedSum([1, 1e100, 1, -1e100])).toBe(2);
    expect(compensatedSum(new Array<number>(10).fill(0.1))).toBe(1);
    expect(compensatedSum([])).toBe(0);
  });
});
