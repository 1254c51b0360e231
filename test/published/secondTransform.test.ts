import FFT from "fft.js";
import { describe, expect, test } from "vitest";
import type { Kernel } from "../../src/kernels/index.js";
import { allAnswers } from "../support/answers.js";
import { noiseKernel } from "../support/kernels.js";
import { noiseImage } from "../support/noise.js";
import { difference } from "../support/publishedCase.js";
import type { Question } from "../support/questions.js";

type Complex = { re: Float64Array; im: Float64Array };

/** One pass of fft.js over each row of a plane, forwards or back. */
function transformedRows({ re, im }: Complex, width: number, height: number, back: boolean): Complex {
  const transform = new FFT(width);
  const [out, line] = [transform.createComplexArray(), transform.createComplexArray()];
  const result = { re: new Float64Array(re.length), im: new Float64Array(im.length) };
  for (let r = 0; r < height; r++) {
    for (let c = 0; c < width; c++) [line[2 * c], line[2 * c + 1]] = [re[r * width + c]!, im[r * width + c]!];
    if (back) transform.inverseTransform(out, line);
    else transform.transform(out, line);
    for (let c = 0; c < width; c++) [result.re[r * width + c], result.im[r * width + c]] = [out[2 * c]!, out[2 * c + 1]!];
  }
  return result;
}

function turned({ re, im }: Complex, width: number, height: number): Complex {
  const place = (index: number): number => (index % height) * width + Math.floor(index / height);
  return { re: Float64Array.from(re, (_, index) => re[place(index)]!), im: Float64Array.from(im, (_, index) => im[place(index)]!) };
}

function transformed(plane: Complex, width: number, height: number, back: boolean): Complex {
  const rows = transformedRows(plane, width, height, back);
  return turned(transformedRows(turned(rows, width, height), height, width, back), height, width);
}

/** Circular convolution as the product of two transforms, in double precision by fft.js; the kernel's origin goes to sample (0, 0). */
function circular(image: ArrayLike<number>, kernel: Kernel, width: number, height: number): Float64Array {
  const count = width * height;
  const taps = kernel.taps;
  const wrapped = new Float64Array(count);
  for (let j = 0; j < kernel.height; j++) {
    for (let i = 0; i < kernel.width; i++) {
      const row = (j - kernel.origin.y + 64 * height) % height;
      const column = (i - kernel.origin.x + 64 * width) % width;
      wrapped[row * width + column]! += taps[j * kernel.width + i]!;
    }
  }
  const x = transformed({ re: Float64Array.from(image), im: new Float64Array(count) }, width, height, false);
  const h = transformed({ re: wrapped, im: new Float64Array(count) }, width, height, false);
  const product = {
    re: x.re.map((re, index) => re * h.re[index]! - x.im[index]! * h.im[index]!),
    im: x.re.map((re, index) => re * h.im[index]! + x.im[index]! * h.re[index]!),
  };
  return transformed(product, width, height, true).re;
}

/** Source   fft.js, an independent transform; A. V. Oppenheim, R. W. Schafer, Discrete-Time Signal Processing, ch. 8 (circular convolution). */
describe("circular convolution by fft.js", () => {
  const shapes: [width: number, height: number, kernel: Kernel][] = [
    [16, 16, noiseKernel(3, 3, 1)],
    [64, 32, noiseKernel(9, 7, 2)],
    [32, 64, noiseKernel(4, 6, 3, { x: 0, y: 5 })],
    [128, 64, noiseKernel(31, 29, 4)],
    [8, 4, noiseKernel(13, 11, 5)],
  ];
  test.each(shapes)("%i × %i, %s", (width, height, kernel) => {
    for (const sample of ["u8", "f32"] as const) {
      const image = noiseImage(sample, width, height, 1, 6);
      const question: Question = { image, kernel, options: { border: "periodic", output: { sample: "f32" } } };
      const expected = circular(image.data, kernel, width, height);
      const largest = expected.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
      // The yardstick's own rounding, in double precision: u₅₃ · (log₂ N + 2) for each of three transforms, on values up to the largest.
      const yardstick = 3 * (Math.log2(width * height) + 2) * 2 ** -53 * largest * width;
      for (const answer of allAnswers(question)) expect(difference(answer, expected, 1, yardstick)).toBeUndefined();
    }
  });
});
