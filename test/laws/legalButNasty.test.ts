import { describe, expect, test } from "vitest";
import type { Border, Channels, Raster } from "../../src/index.js";
import { box, kernel, outer, type Kernel } from "../../src/kernels/index.js";
import { judge } from "../reference/agreement.js";
import { noiseKernel } from "../support/kernels.js";
import { ways } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import type { Question } from "../support/questions.js";

/** Every method of every build, held to the definition. */
function check(question: Question): void {
  const judged = judge(question.image, question.kernel, question.options, question.correlate);
  for (const way of ways(question)) {
    const { width, height } = judged.defined;
    const disagreement = judged.disagreement({ data: way.answer(question), width, height }, way.errorBound);
    expect(disagreement, `${way.build} ${way.method}`).toBeUndefined();
  }
}

const thin: [name: string, kernel: Kernel][] = [
  ["1 × 1", kernel([[0.75]])],
  ["1 × 9", noiseKernel(1, 9, 1)],
  ["9 × 1", noiseKernel(9, 1, 2)],
  ["2 × 2", noiseKernel(2, 2, 3)],
  ["5 × 3", noiseKernel(5, 3, 4)],
  ["outer product 4 × 3", outer([1, -2, 1], [1, 3, 3, 1])],
  ["box 6 × 4", box({ width: 6, height: 4 })],
];

/** Lanes hold four floats, bytes are narrowed sixteen at a time: rows of 1 … 35 samples end everywhere in them. */
describe.each(thin)("widths around the vector width: %s", (_, taps) => {
  test.each<Channels>([1, 2, 3, 4])("%i channels", (channels) => {
    for (let width = 1; width * channels <= 35; width++) {
      check({ image: noiseImage("u8", width, 3, channels, width), kernel: taps, options: { alpha: "none" } });
      check({ image: noiseImage("f32", width, 2, channels, width), kernel: taps, options: { alpha: "none", border: "zero", extent: "full" } });
    }
  });
});

const everyBorder: Border[] = [
  "replicate",
  "zero",
  { constant: 7 },
  "periodic",
  "half-sample-symmetric",
  "whole-sample-symmetric",
  { rows: "periodic", columns: "zero" },
];
describe.each(everyBorder.map((border) => [JSON.stringify(border), border] as const))("border %s", (_, border) => {
  test("images of one pixel, one row and one column under kernels far larger", () => {
    for (const [width, height] of [
      [1, 1],
      [7, 1],
      [1, 7],
      [2, 3],
    ] as const) {
      for (const taps of [noiseKernel(23, 19, 1), noiseKernel(40, 1, 2), outer([1, 2, 3, 4, 5, 6, 7, 8, 9], [1, -1, 1, -1, 1, -1, 1]), box(33)]) {
        check({ image: noiseImage("u8", width, height, 1, 3), kernel: taps, options: { border } });
        check({ image: noiseImage("u8", width, height, 3, 4), kernel: taps, options: { border, extent: "full" }, correlate: true });
      }
    }
  });
});

test("renormalised under a kernel far larger than the image", () => {
  for (const [width, height] of [
    [1, 1],
    [5, 2],
  ] as const) {
    check({ image: noiseImage("u8", width, height, 1, 3), kernel: box(21), options: { border: "renormalised" } });
    check({
      image: noiseImage("u8", width, height, 1, 3),
      kernel: outer([1, 2, 3, 2, 1], [1, 2, 3, 4, 3, 2, 1]),
      options: { border: "renormalised", extent: "full" },
    });
  }
});

test("kernels of nothing but zeros give zeros", () => {
  const nothing = kernel(Array.from({ length: 5 }, () => [0, 0, 0]));
  for (const sample of ["u8", "u16", "f32"] as const) {
    const question: Question = { image: noiseImage(sample, 19, 8, 3, 2), kernel: nothing };
    for (const way of ways(question)) expect(new Set(way.answer(question)), `${way.build} ${way.method}`).toEqual(new Set([0]));
  }
});

test("denormal taps and samples", () => {
  const taps = kernel([
    [1e-40, 0.5, 1e-310],
    [-1e-42, 0.25, 4e-45],
  ]);
  check({ image: noiseImage("u8", 21, 9, 1, 5), kernel: taps });
  check({ image: noiseImage("f32", 21, 9, 1, 5), kernel: taps });
  const image = noiseImage("f32", 21, 9, 1, 6);
  image.data.forEach((value, index) => (image.data[index] = index % 3 === 0 ? value * 1e-40 : value));
  check({ image, kernel: noiseKernel(3, 3, 7) });
});

describe("samples that are not finite stay within the kernel's reach", () => {
  const kernels: [name: string, kernel: Kernel][] = [
    ["3 × 3", noiseKernel(3, 3, 1)],
    ["7 × 4, another origin", noiseKernel(7, 4, 2, { x: 6, y: 0 })],
    ["15 × 15", noiseKernel(15, 15, 3)],
    ["outer product 5 × 5", outer([1, 2, 3, 2, 1], [1, 2, -3, 2, 1])],
    ["box 9 × 9", box(9)],
  ];
  const places: [name: string, changed: [row: number, column: number, value: number][]][] = [
    ["NaN in the middle", [[12, 15, NaN]]],
    ["∞ in a corner", [[0, 0, Infinity]]],
    ["−∞ in the last sample", [[24, 30, -Infinity]]],
    [
      "∞ beside −∞",
      [
        [4, 4, Infinity],
        [4, 5, -Infinity],
      ],
    ],
  ];
  describe.each(kernels)("%s", (_, taps) => {
    test.each(places)("%s", (__, changed) => {
      for (const channels of [1, 3] as const) {
        for (const border of ["replicate", "zero", "periodic"] as const) {
          const image = noiseImage("f32", 31, 25, channels, 8) as Raster<Float32Array>;
          for (const [row, column, value] of changed) image.data[(row * 31 + column) * channels + channels - 1] = value;
          check({ image, kernel: taps, options: { border } });
        }
      }
    });
  });

  test("and reach every result whose taps hold one", () => {
    const image = noiseImage("f32", 31, 25, 1, 8) as Raster<Float32Array>;
    [image.data[12 * 31 + 15], image.data[30]] = [NaN, Infinity];
    const question: Question = { image, kernel: noiseKernel(7, 5, 9), options: { border: "zero" } };
    const { touched } = judge(image, question.kernel, question.options).defined;
    for (const way of ways(question)) {
      const result = Array.from(way.answer(question));
      expect(
        result.map((value) => (Number.isFinite(value) ? 0 : 1)),
        `${way.build} ${way.method}`,
      ).toEqual(Array.from(touched));
    }
  });
});
