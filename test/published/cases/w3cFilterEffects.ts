/**
 * Source   W3C, Filter Effects Module Level 1, feConvolveMatrix: the 5 × 5 example image with the kernel 1 … 9 and its
 *          printed sum 3480 / 45. The other results follow from the printed formula by exact integer arithmetic.
 */
import { kernel, scaled } from "../../../src/kernels/index.js";
import type { Border } from "../../../src/types.js";
import { byteCase, floatCase, type PublishedCase } from "../../support/publishedCase.js";

export const exampleImage = [
  [0, 20, 40, 235, 235],
  [100, 120, 140, 235, 235],
  [200, 220, 240, 235, 235],
  [255, 255, 255, 255, 255],
  [255, 255, 255, 255, 255],
];
const oneToNine = kernel([
  [1, 2, 3],
  [4, 5, 6],
  [7, 8, 9],
]);
const five = (value: number): number[] => Array.from({ length: 5 }, () => value);

/** Sums before the division by 45. */
const sums: [name: string, border: Border, rows: number[][]][] = [
  [
    "duplicate",
    "replicate",
    [[840, 1380, 4280, 7365, 10575], [2940, 3480, 5880, 8265, 10575], [7150, 7630, 8835, 9870, 10695], [10295, 10595, 10900, 11040, 10995], five(11475)],
  ],
  [
    "wrap",
    "periodic",
    [
      [8635, 7060, 8255, 9600, 9980],
      [5970, 3480, 5880, 8265, 8355],
      [8575, 7630, 8835, 9870, 9610],
      [10610, 10595, 10900, 11040, 10750],
      [10670, 10025, 10320, 10770, 11120],
    ],
  ],
  [
    "none",
    "zero",
    [
      [400, 940, 2135, 3480, 3760],
      [1740, 3480, 5880, 8265, 7755],
      [4285, 7630, 8835, 9870, 7855],
      [6200, 10595, 10900, 11040, 8075],
      [6120, 9945, 9945, 9945, 7140],
    ],
  ],
];

/** n / 45 to the nearest integer, in integers: what Chromium writes for every one of these. */
const nearestOver45 = (numerator: number): number => Math.floor((2 * numerator + 45) / 90);

const sobelX = kernel([
  [1, 0, -1],
  [2, 0, -2],
  [1, 0, -1],
]);
const sobelSums = [[80, 160, 760, 680, 0], [80, 160, 460, 380, 0], [60, 120, 145, 85, 0], [20, 40, 15, -5, 0], five(0)];
const bias = (sum: number): number => Math.min(255, Math.max(0, Math.floor(sum + 127.5 + 0.5)));

export const w3cFilterEffects: PublishedCase[] = [
  ...sums.map(([name, border, rows]) => floatCase(`edgeMode ${name}: sums of the worked example`, exampleImage, oneToNine, { border }, rows)),
  ...sums.map(([name, border, rows]) =>
    byteCase(
      `edgeMode ${name}: bytes of the worked example`,
      exampleImage,
      scaled(oneToNine, 1 / 45),
      { border },
      rows.map((row) => row.map(nearestOver45)),
    ),
  ),
  floatCase("a Sobel mask, divisor 1 as its sum is 0", exampleImage, sobelX, {}, sobelSums),
  byteCase(
    "the same with bias one half",
    exampleImage,
    sobelX,
    { output: { offset: 127.5 } },
    sobelSums.map((row) => row.map(bias)),
  ),
  // target (0, 0) of a 3 × 2 kernel is origin (2, 1) in taps that are turned: the result is the sample at (x + 2, y + 1).
  floatCase(
    "order 3 × 2, target (0, 0)",
    exampleImage,
    kernel(
      [
        [1, 0, 0],
        [0, 0, 0],
      ],
      { origin: { x: 2, y: 1 } },
    ),
    {},
    exampleImage.map((_, y) => exampleImage[0]!.map((_, x) => exampleImage[Math.min(y + 1, 4)]![Math.min(x + 2, 4)]!)),
  ),
  floatCase(
    "order 2, target by default",
    exampleImage,
    kernel([
      [1, 0],
      [0, 0],
    ]),
    {},
    exampleImage,
  ),
];
