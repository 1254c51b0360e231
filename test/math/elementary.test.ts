import { describe, expect, test } from "vitest";
import { complementaryErrorFunction, errorFunction } from "../../src/math/elementary/errorFunction.js";
import { exponential } from "../../src/math/elementary/exponential.js";
import { exactErrorFunction, exactExponential, exactly, one, pi, product, toNumber, ulpError } from "./highPrecision.js";

/** Evenly spread arguments that are no round numbers. */
function spread(from: number, to: number, count: number): number[] {
  return Array.from({ length: count }, (_, k) => from + ((to - from) * (k + 0.618034)) / count);
}

/**
 * Abramowitz & Stegun, Handbook of Mathematical Functions (NBS AMS 55), Table 7.1, to its 10 decimals
 * (values computed anew; the table's place is from memory).
 */
export const errorFunctionTable: readonly (readonly [number, number])[] = [
  [0.1, 0.112462916],
  [0.2, 0.2227025892],
  [0.25, 0.2763263902],
  [0.3, 0.3286267595],
  [0.4, 0.428392355],
  [0.5, 0.5204998778],
  [0.6, 0.6038560908],
  [0.7, 0.6778011938],
  [0.75, 0.7111556337],
  [0.8, 0.7421009647],
  [0.9, 0.7969082124],
  [1, 0.8427007929],
  [1.1, 0.8802050696],
  [1.2, 0.9103139782],
  [1.25, 0.9229001283],
  [1.3, 0.9340079449],
  [1.4, 0.9522851198],
  [1.5, 0.9661051465],
  [1.6, 0.9763483833],
  [1.7, 0.9837904586],
  [1.75, 0.9866716712],
  [1.8, 0.9890905016],
  [1.9, 0.9927904292],
  [2, 0.995322265],
  [2.25, 0.9985372834],
  [2.5, 0.999593048],
  [3, 0.9999779095],
];

describe("the yardstick itself", () => {
  test("has the digits of π and e that everybody knows", () => {
    expect(toNumber(pi)).toBe(3.141592653589793);
    expect(toNumber(exactExponential(exactly(1)))).toBe(2.718281828459045);
  });
});

describe("exponential", () => {
  test("is within 1 ulp of eˣ over its whole range", () => {
    for (const x of [...spread(-708, 709.7, 301), ...spread(-2, 2, 201)]) {
      expect(ulpError(exponential(x), exactExponential(exactly(x))), `x = ${x}`).toBeLessThan(1);
    }
  });

  test("is within 1.5 ulp where the result is subnormal", () => {
    for (const x of spread(-745, -708.5, 40)) expect(ulpError(exponential(x), exactExponential(exactly(x))), `x = ${x}`).toBeLessThan(1.5);
  });

  test("takes a correction to its argument", () => {
    const low = 2 ** -54;
    const exact = product(exactExponential(exactly(1)), exactExponential(exactly(low)));
    expect(ulpError(exponential(1, low), exact)).toBeLessThan(1);
  });

  test("is exact at 0 and knows its ends", () => {
    expect(exponential(0)).toBe(1);
    expect(exponential(-Infinity)).toBe(0);
    expect(exponential(-800)).toBe(0);
    expect(exponential(Infinity)).toBe(Infinity);
    expect(exponential(800)).toBe(Infinity);
    expect(exponential(Number.NaN)).toBeNaN();
  });
});

describe("errorFunction", () => {
  test("has the ten decimals of Abramowitz & Stegun, Table 7.1", () => {
    for (const [x, erf] of errorFunctionTable) expect(Math.abs(errorFunction(x) - erf), `x = ${x}`).toBeLessThanOrEqual(0.5e-10 + 1e-15);
  });

  test("is within 4 ulp of erf", () => {
    for (const x of [...spread(-6, 6, 301), ...spread(0.7, 0.8, 50), 1e-9, 1e-200]) {
      expect(ulpError(errorFunction(x), exactErrorFunction(exactly(x))), `x = ${x}`).toBeLessThan(4);
    }
  });

  test("is odd to the last bit", () => {
    for (const x of spread(0, 7, 97)) expect(errorFunction(-x)).toBe(-errorFunction(x));
  });

  test("knows its ends", () => {
    expect(errorFunction(0)).toBe(0);
    expect(errorFunction(Infinity)).toBe(1);
    expect(errorFunction(-Infinity)).toBe(-1);
    expect(errorFunction(Number.NaN)).toBeNaN();
  });
});

describe("complementaryErrorFunction", () => {
  test("is within 4 ulp of erfc, far out too", () => {
    for (const x of [...spread(0, 3, 201), ...spread(3, 26, 101)]) {
      expect(ulpError(complementaryErrorFunction(x), one - exactErrorFunction(exactly(x))), `x = ${x}`).toBeLessThan(4);
    }
  });

  test("ends in 0 and in 2", () => {
    expect(complementaryErrorFunction(28)).toBe(0);
    expect(complementaryErrorFunction(Infinity)).toBe(0);
    expect(complementaryErrorFunction(-Infinity)).toBe(2);
  });
});
