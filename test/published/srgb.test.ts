import { describe, expect, test } from "vitest";
import { kernel } from "../../src/kernels/index.js";
import { allAnswers } from "../support/answers.js";
import type { Question } from "../support/questions.js";

/**
 * Source   IEC 61966-2-1; W3C, CSS Color Module Level 4, sample code for colour conversions (the curve); values computed from it in
 *          double precision, ten decimals.
 */
const decodedCodes: [code: number, linear: number][] = [
  [0, 0],
  [1, 0.000303527],
  [2, 0.000607054],
  [10, 0.0030352698],
  [11, 0.0033465358],
  [16, 0.0051815167],
  [32, 0.0144438436],
  [50, 0.0318960331],
  [64, 0.0512694584],
  [100, 0.1274376804],
  [127, 0.2122307574],
  [128, 0.2158605001],
  [150, 0.3049873141],
  [180, 0.4564110232],
  [188, 0.502886458],
  [200, 0.5775804404],
  [220, 0.7156935005],
  [240, 0.8713671192],
  [254, 0.9911020971],
  [255, 1],
];
const encodedValues: [linear: number, encoded: number][] = [
  [0.001, 0.01292],
  [0.01, 0.0998528227],
  [0.05, 0.247800528],
  [0.18, 0.4613561295],
  [0.25, 0.5370987305],
  [0.5, 0.7353569831],
  [0.75, 0.8808250211],
];
const halfOfLastDigit = 0.5e-10;
/** Steepest slope of the encoding: what an error of the linear value can grow to. */
const steepest = 12.92;
/** Curve in, curve out, gain and the final rounding to single precision, once each. */
const roundings = 4 * 2 ** -24;

test("decoding: bytes dimmed a thousandfold stay on the straight part of the curve, which shows their linear values", () => {
  const image = { data: Uint8Array.from(decodedCodes, ([code]) => code), width: decodedCodes.length, height: 1, channels: 1 as const };
  const question: Question = { image, kernel: kernel([[0.001]]), options: { light: "linear", output: { sample: "f32", gain: 1 / 255 } } };
  for (const { from, data, errorBound } of allAnswers(question)) {
    decodedCodes.forEach(([, linear], index) => {
      const expected = 0.001 * 12.92 * linear;
      const allowed = steepest * (errorBound + 0.001 * halfOfLastDigit) + roundings * expected;
      expect(Math.abs(data[index]! - expected), `${from}, code ${decodedCodes[index]![0]}`).toBeLessThanOrEqual(allowed);
    });
  }
});

test.each(encodedValues)("encoding: white dimmed to %f is %f", (linear, encoded) => {
  const image = { data: Uint8Array.of(255), width: 1, height: 1, channels: 1 as const };
  const question: Question = { image, kernel: kernel([[linear]]), options: { light: "linear", output: { sample: "f32", gain: 1 / 255 } } };
  for (const { from, data, errorBound } of allAnswers(question)) {
    expect(Math.abs(data[0]! - encoded), from).toBeLessThanOrEqual(steepest * errorBound + halfOfLastDigit + roundings * encoded);
  }
});

/** The pairs were also averaged by a browser's own linear-light filter, with the same bytes above code 50. */
describe("means in linear light", () => {
  test.each([
    [0, 255, 188],
    [100, 200, 160],
    [10, 30, 22],
  ])("%i and %i: %i", (dark, bright, mean) => {
    const image = { data: Uint8Array.of(dark, bright), width: 2, height: 1, channels: 1 as const };
    const question: Question = { image, kernel: kernel([[0.5, 0.5]]), options: { light: "linear", border: "periodic" } };
    for (const { from, data } of allAnswers(question)) expect(Array.from(data), from).toEqual([mean, mean]);
  });
  test("not in linear light: 0 and 255 give 128", () => {
    const image = { data: Uint8Array.of(0, 255), width: 2, height: 1, channels: 1 as const };
    for (const { from, data } of allAnswers({ image, kernel: kernel([[0.5, 0.5]]), options: { border: "periodic" } }))
      expect(Array.from(data), from).toEqual([128, 128]);
  });
});
