import { describe, expect, test } from "vitest";
import { gamma, transformError } from "../../src/math/rounding.js";
import { radicesOf, smoothMultiplesOfFour } from "../../src/math/smoothNumbers.js";
import { noise } from "../support/noise.js";
import { bench, forms, inner } from "./debugCore.js";
import { placePlan } from "./transformPlan.js";

/** Where the forward transform leaves frequency k: its digits, by the radices, turned round. */
function placeOf(k: number, radices: readonly number[]): number {
  let block = radices.reduce((product, radix) => product * radix, 1);
  let place = 0;
  for (const radix of radices) {
    block /= radix;
    place += (k % radix) * block;
    k = Math.floor(k / radix);
  }
  return place;
}

/** Roundings on the longest way through a butterfly: its sums, its rounded constants, and three for a turn by a rounded root. */
const roundings: Record<number, number> = { 2: 1 + 3, 3: 5 + 3, 4: 2 + 3, 5: 6 + 3 };

/**
 * Relative error in the 2-norm that a transform of these passes can have:  Π (1 + 2 · √R · γ(k_R)) − 1.
 * Each pass is a matrix √R times a unitary one; rounding errors stay below γ(k) times its absolute values, whose norm is at most √R times
 * larger, and a part of a complex product is below √2 · √2 times its modulus.
 * Source    Higham, Accuracy and Stability of Numerical Algorithms, §24.1, with the constants of these butterflies
 */
function errorBound(radices: readonly number[]): number {
  return radices.reduce((product, radix) => product * (1 + 2 * Math.sqrt(radix) * gamma(roundings[radix]!)), 1) - 1;
}

interface Columns {
  points: number;
  floats: number;
  re: Float32Array;
  im: Float32Array;
}

function noiseColumns(points: number, floats: number, integers = false): Columns {
  const next = noise(points + floats);
  next();
  const made = (): Float32Array => Float32Array.from({ length: points * floats }, () => (integers ? Math.floor(16 * next()) - 8 : 2 * next() - 1));
  return { points, floats, re: made(), im: made() };
}

/** One frequency of one column by definition, Σ x[r] · e^(−2πikr/N), in double. */
function frequency({ points, floats, re, im }: Columns, column: number, k: number): { re: number; im: number } {
  const sum = { re: 0, im: 0 };
  for (let r = 0, at = column; r < points; r++, at += floats) {
    const angle = (2 * Math.PI * ((k * r) % points)) / points;
    const c = Math.cos(angle);
    const s = Math.sin(angle);
    sum.re += re[at]! * c + im[at]! * s;
    sum.im += im[at]! * c - re[at]! * s;
  }
  return sum;
}

/** Columns in memory: re and im planes whose rows are longer than what is transformed; what lies beside must not change. */
function laid({ points, floats, re, im }: Columns) {
  const stride = 4 * (floats + 4);
  const apart = points * stride + 64;
  const base = bench.take(apart + points * stride);
  bench.view(Float32Array, base, (apart + points * stride) / 4).fill(-77);
  for (let r = 0; r < points; r++) {
    bench.view(Float32Array, base + r * stride, floats).set(re.subarray(r * floats, (r + 1) * floats));
    bench.view(Float32Array, base + apart + r * stride, floats).set(im.subarray(r * floats, (r + 1) * floats));
  }
  const perRow = stride / 4;
  const part = (start: number) => (): Float32Array => {
    const plane = bench.view(Float32Array, start, points * perRow);
    return Float32Array.from({ length: points * floats }, (_, k) => plane[Math.floor(k / floats) * perRow + (k % floats)]!);
  };
  const gaps = (plane: Float32Array): boolean => plane.every((value, k) => k % perRow < floats || value === -77);
  const untouched = (): boolean => [base, base + apart].every((start) => gaps(bench.view(Float32Array, start, points * perRow)));
  return { base, stride, apart, re: part(base), im: part(base + apart), untouched };
}

const norm = (...parts: ArrayLike<number>[]): number => Math.sqrt(parts.reduce((sum, part) => sum + Array.from(part).reduce((s, x) => s + x * x, 0), 0));

/** Forward and back in one form; what comes between and after. */
function transformed(radices: readonly number[], columns: Columns, wide: boolean) {
  bench.clear();
  const plan = placePlan(bench, radices);
  const { base, stride, apart, re, im, untouched } = laid(columns);
  const vectors = columns.floats / (wide ? 4 : 1);
  inner.forwardTransform(wide, plan, base, stride, apart, vectors);
  const forward = { re: re(), im: im() };
  inner.inverseTransform(wide, plan, base, stride, apart, vectors);
  expect(untouched()).toBe(true);
  expect(bench.damage()).toBeUndefined();
  return { forward, back: { re: re(), im: im() } };
}

/** 2-norm of what a column's spectrum is off at `frequencies`, and of the whole column's spectrum by Parseval's theorem. */
function spectrumError(columns: Columns, column: number, forward: { re: Float32Array; im: Float32Array }, radices: readonly number[], ks: number[]) {
  const { points, floats, re, im } = columns;
  let square = 0;
  for (const k of ks) {
    const expected = frequency(columns, column, k);
    const at = placeOf(k, radices) * floats + column;
    square += (forward.re[at]! - expected.re) ** 2 + (forward.im[at]! - expected.im) ** 2;
  }
  const ofColumn = (part: Float32Array): number[] => Array.from({ length: points }, (_, r) => part[r * floats + column]!);
  return { error: Math.sqrt(square), whole: Math.sqrt(points) * norm(ofColumn(re), ofColumn(im)) };
}

function check(radices: readonly number[], frequencies: number, floats: number): void {
  const points = radices.reduce((product, radix) => product * radix, 1);
  const columns = noiseColumns(points, floats);
  const results = forms.map(({ wide }) => transformed(radices, columns, wide));
  expect(results[0]).toEqual(results[1]);
  const { forward, back } = results[0]!;
  const ks = Array.from({ length: Math.min(points, frequencies) }, (_, k) => (points <= frequencies ? k : (k * 997) % points));
  for (const column of [0, floats - 1]) {
    const { error, whole } = spectrumError(columns, column, forward, radices, ks);
    expect(error / whole, `${points} points, column ${column}`).toBeLessThanOrEqual(errorBound(radices));
  }
  const differences = [back.re.map((x, k) => x / points - columns.re[k]!), back.im.map((x, k) => x / points - columns.im[k]!)];
  const bothWays = (1 + errorBound(radices)) ** 2 - 1;
  expect(norm(...differences) / norm(columns.re, columns.im)).toBeLessThanOrEqual(bothWays);
  // What planning promises of a filter that is nothing but an impulse: 2 · log₂(N) · u of the largest sample.
  const worst = differences.flatMap((part) => Array.from(part)).reduce((most, x) => Math.max(most, Math.abs(x)), 0);
  expect(worst).toBeLessThanOrEqual(transformError(points * 4) * Math.SQRT2);
}

describe("forwardTransform is the DFT in digit-reversed order, inverseTransform takes it back", () => {
  test.each(smoothMultiplesOfFour(256))("%i points, every frequency", (points) => check(radicesOf(points)!, 256, 4));

  test.each([320, 480, 500, 972, 1000, 1024, 1500, 2048, 2916, 3000, 3072, 4000, 4096])("%i points, some frequencies", (points) =>
    check(radicesOf(points)!, 12, 4),
  );

  test.each([
    [[2]],
    [[3]],
    [[4]],
    [[5]],
    [[2, 2]],
    [[2, 3]],
    [[3, 2]],
    [[4, 5]],
    [[5, 4]],
    [[5, 3, 2, 4]],
    [[4, 2, 3, 5]],
    [[3, 3, 3]],
    [[5, 5]],
    [[2, 2, 2, 2]],
  ])("radices %j in this order", (radices) => check(radices, 256, 4));

  test.each([4, 8, 12, 16, 20, 40])("%i columns at once", (floats) => check([3, 4], 256, floats));
});

test.each([4, 8, 16, 64])("%i points of small integers: sums and quarter turns are exact", (points) => {
  const radices = radicesOf(points)!;
  const { re, im } = noiseColumns(points, 4, true);
  // Samples in the first place of every quarter alone meet quarter turns and nothing else.
  const sparse = (part: Float32Array): Float32Array => part.map((x, k) => (Math.floor(k / 4) % (points / 4) === 0 ? x : 0));
  const columns = { points, floats: 4, re: sparse(re), im: sparse(im) };
  const { forward } = transformed(radices, columns, true);
  for (let k = 0; k < points; k++) {
    const expected = frequency(columns, 1, k);
    const at = placeOf(k, radices) * 4 + 1;
    expect([forward.re[at], forward.im[at]], `frequency ${k}`).toEqual([Math.round(expected.re) + 0, Math.round(expected.im) + 0]);
  }
});
