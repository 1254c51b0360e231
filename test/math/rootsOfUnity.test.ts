import { describe, expect, test } from "vitest";
import { rootOfUnity, rootsOfUnity } from "../../src/math/rootsOfUnity.js";
import { exactRoot, toNumber, ulpError } from "./highPrecision.js";

describe("rootsOfUnity", () => {
  test.each([3, 5, 12, 60, 225, 256, 360, 1000, 4096, 6750])("is within 0.75 ulp for %i points", (n) => {
    const errorOf = (got: number, exact: bigint): number => (got === 0 ? Math.abs(toNumber(exact)) * 2 ** 60 : ulpError(got, exact));
    const { cosine, sine } = rootsOfUnity(n);
    for (let k = 1; k < n; k += Math.max(1, Math.floor(n / 61))) {
      const exact = exactRoot(k, n);
      expect(errorOf(cosine[k]!, exact.cosine), `cosine ${k}/${n}`).toBeLessThan(0.75);
      expect(errorOf(sine[k]!, exact.sine), `sine ${k}/${n}`).toBeLessThan(0.75);
    }
  });

  test("has exact quarter turns and no negative zeros", () => {
    const { cosine, sine } = rootsOfUnity(4);
    expect(Array.from(cosine)).toEqual([1, 0, -1, 0]);
    expect(Array.from(sine)).toEqual([0, 1, 0, -1]);
  });

  test("has all symmetries of the circle to the last bit", () => {
    const n = 48;
    const { cosine, sine } = rootsOfUnity(n);
    for (let k = 0; k < n; k++) {
      expect(cosine[(n - k) % n]).toBe(cosine[k]);
      expect(sine[(n - k) % n]! + sine[k]!).toBe(0);
      expect(sine[(k + n / 4) % n]).toBe(cosine[k]);
      expect(cosine[(n / 4 - k + n) % n]).toBe(sine[k]);
    }
  });
});

describe("rootOfUnity", () => {
  test("has the values that every trigonometric table prints", () => {
    expect(rootOfUnity(30, 360)).toEqual({ cosine: 0.8660254037844386, sine: 0.5 });
    expect(rootOfUnity(45, 360)).toEqual({ cosine: Math.SQRT1_2, sine: Math.SQRT1_2 });
    expect(rootOfUnity(60, 360).cosine).toBe(0.5);
    // cos 36° = (1 + √5) / 4, Euclid XIII
    expect(Math.abs(rootOfUnity(1, 10).cosine - (1 + Math.sqrt(5)) / 4)).toBeLessThanOrEqual(2 ** -53);
  });

  test("goes round as often as one likes, in both directions", () => {
    expect(rootOfUnity(7 + 9 * 360, 360)).toEqual(rootOfUnity(7, 360));
    expect(rootOfUnity(-7, 360)).toEqual({ cosine: rootOfUnity(7, 360).cosine, sine: -rootOfUnity(7, 360).sine });
    expect(rootOfUnity(-1e-20, 1).sine).toBeCloseTo(-2e-20 * Math.PI, 34);
  });

  test("takes fractions of a step", () => {
    expect(rootOfUnity(22.5, 360)).toEqual(rootOfUnity(1, 16));
    expect(rootOfUnity(157.5, 360)).toEqual(rootOfUnity(7, 16));
  });
});
