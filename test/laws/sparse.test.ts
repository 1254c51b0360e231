import { describe, expect, test } from "vitest";
import type { ConvolveOptions, SampleType } from "../../src/index.js";
import { kernel, kernelFromRaster, line, type Kernel } from "../../src/kernels/index.js";
import { judge } from "../reference/agreement.js";
import { applicable, run } from "../support/answers.js";
import { builds } from "../support/engines.js";
import { firstDifference } from "../support/methods.js";
import { noise, noiseImage } from "../support/noise.js";
import type { Question } from "../support/questions.js";

/*
 * Kernels with many taps of 0 are gone through by a list of the others, in their order: a tap of 0 adds nothing, so no byte changes.
 */
const sparse = (width: number, height: number, tapAt: (i: number, j: number) => number, origin?: { x: number; y: number }): Kernel => {
  const rows = Array.from({ length: height }, (_, j) => Array.from({ length: width }, (_, i) => tapAt(i, j)));
  return origin === undefined ? kernel(rows) : kernel(rows, { origin });
};

const next = noise(77);
const kernels: [name: string, kernel: Kernel][] = [
  ["a diagonal", sparse(9, 9, (i, j) => (i === j ? 1 / 9 : 0))],
  ["a slanted line of motion", line({ length: 11, angleInDegrees: 30 })],
  ["a comb of an even number of rows", sparse(12, 6, (i, j) => (i % 4 === 0 && j % 3 === 1 ? 0.1 : 0), { x: 2, y: 5 })],
  ["one tap in a corner", sparse(7, 5, (i, j) => (i === 6 && j === 0 ? 0.75 : 0))],
  ["a ring with both signs", sparse(11, 11, (i, j) => (Math.abs(Math.hypot(i - 5, j - 5) - 4) < 0.2 ? next() - 0.5 : 0))],
  ["a row with gaps", sparse(16, 1, (i) => (i % 5 === 0 ? 0.2 : 0))],
  ["a column with gaps", sparse(1, 13, (_, j) => (j % 6 === 0 ? 0.2 : 0))],
];

const isListed = (question: Question): boolean =>
  /taps that are not 0/.test(applicable("simd", question).find(({ method }) => method === "direct")!.arithmetic);

describe.each(kernels)("%s", (_, taps) => {
  test.each<SampleType>(["u8", "u16", "f32"])("is right on %s by its list, in both builds, at any width", (sample) => {
    const variants: ConvolveOptions[] = [
      {},
      { alpha: "none" },
      { border: "periodic", extent: "full", alpha: "none" },
      { alpha: "keep", output: { gain: 0.5, offset: 3 } },
      { alpha: "none", region: { x: 3, y: 1, width: 1, height: 2 } },
    ];
    for (const options of variants) {
      for (const [width, height, channels] of [
        [40, 13, 4],
        [5, 3, 2],
        [29, 8, 4],
      ] as const) {
        const question: Question = { image: noiseImage(sample, width, height, channels, 3), kernel: taps, options };
        expect(isListed(question)).toBe(true);
        const { defined, disagreement } = judge(question.image, taps, options);
        const answers = builds.map((build) => run(build, question, "direct").data);
        const { errorBound } = applicable("simd", question).find(({ method }) => method === "direct")!;
        expect(disagreement({ ...defined, data: answers[0]! }, errorBound)).toBeUndefined();
        expect(firstDifference(answers[1]!, answers[0]!)).toBeUndefined();
      }
    }
  });

  test("sums floats as if all taps were there: row by row, each product and each sum rounded once", () => {
    const image = noiseImage("f32", 37, 19, 1, 8) as { data: Float32Array; width: number; height: number; channels: 1 };
    const { data } = run("simd", { image, kernel: taps, options: { border: "zero" }, correlate: true }, "direct");
    const at = (r: number, c: number): number => (r >= 0 && r < 19 && c >= 0 && c < 37 ? image.data[r * 37 + c]! : 0);
    const expected = Float32Array.from({ length: 37 * 19 }, (_, k) => {
      let sum = 0;
      for (let t = 0; t < taps.taps.length; t++) {
        const [r, c] = [Math.floor(k / 37) + Math.floor(t / taps.width) - taps.origin.y, (k % 37) + (t % taps.width) - taps.origin.x];
        sum = Math.fround(sum + Math.fround(Math.fround(taps.taps[t]!) * at(r, c)));
      }
      return sum;
    });
    expect(firstDifference(data, expected)).toBeUndefined();
  });
});

test("a measured spread on a black ground is listed, a full one is not", () => {
  const spot = kernelFromRaster(
    { data: Uint8Array.from({ length: 81 }, (_, k) => (k % 10 === 0 ? 200 : 0)), width: 9, height: 9, channels: 1 },
    { background: 0 },
  );
  expect(isListed({ image: noiseImage("u8", 30, 30), kernel: spot })).toBe(true);
  expect(isListed({ image: noiseImage("u8", 30, 30), kernel: sparse(5, 5, (i, j) => (i + j + 1) / 125) })).toBe(false);
});
