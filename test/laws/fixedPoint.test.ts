import { describe, expect, test } from "vitest";
import type { ConvolveOptions, Method } from "../../src/index.js";
import { gaussian, kernel, outer, scaled, type Kernel } from "../../src/kernels/index.js";
import { judge } from "../reference/agreement.js";
import { applicable, run } from "../support/answers.js";
import { builds } from "../support/engines.js";
import { noiseKernel } from "../support/kernels.js";
import { firstDifference } from "../support/methods.js";
import { noise, noiseImage } from "../support/noise.js";
import type { Question } from "../support/questions.js";

/*
 * Bytes that stay bytes are filtered in fixed point: 8-bit samples × 16-bit taps, exact 32-bit sums. What is off is the rounding of the
 * taps (and, for separable kernels, of the column sums), which `tolerance` limits.
 */
const isFixed = (question: Question, method: Method): boolean =>
  applicable("simd", question)
    .find((found) => found.method === method)
    ?.arithmetic.startsWith("fixed point") ?? false;

const ask = (taps: Kernel, options: ConvolveOptions = {}, channels: 1 | 2 | 3 | 4 = 1, width = 45, height = 23): Question => ({
  image: noiseImage("u8", width, height, channels, 5),
  kernel: taps,
  options: { alpha: "none", ...options },
});

const irregular = scaled(noiseKernel(5, 4, 9), 0.1);
const smooth = gaussian({ sigma: 2.5 });

describe("where it is used", () => {
  test("for bytes of bytes, with gain, offset, kept alpha and every border that is not renormalised", () => {
    for (const options of [
      {},
      { border: "periodic" },
      { border: { constant: 200 } },
      { output: { gain: 0.7, offset: 12.5 } },
      { extent: "full" },
    ] as ConvolveOptions[]) {
      expect(isFixed(ask(irregular, options), "direct"), JSON.stringify(options)).toBe(true);
      expect(isFixed(ask(smooth, options), "separable"), JSON.stringify(options)).toBe(true);
    }
    expect(isFixed(ask(irregular, { alpha: "keep" }, 4), "direct")).toBe(true);
  });

  test("never for other samples, decoded or divided colours, or divided sums", () => {
    const others: Question[] = [
      ask(smooth, { output: { sample: "f32" } }),
      ask(smooth, { output: { sample: "u16" } }),
      ask(smooth, { light: "linear" }),
      ask(smooth, { border: "renormalised" }),
      ask(smooth, { alpha: "straight" }, 4),
      ask(smooth, { alpha: "premultiplied" }, 2),
      { ...ask(smooth), image: noiseImage("u16", 20, 20) },
    ];
    for (const question of others) {
      expect(isFixed(question, "direct"), JSON.stringify(question.options)).toBe(false);
      expect(isFixed(question, "separable"), JSON.stringify(question.options)).toBe(false);
    }
  });

  test("only where the rounded taps stay within the tolerance: none is allowed where it is 0, but for taps that need no rounding", () => {
    expect(isFixed(ask(irregular, { tolerance: 0 }), "direct")).toBe(false);
    expect(isFixed(ask(smooth, { tolerance: 0 }), "separable")).toBe(false);
    const eighths = outer([0.25, 0.5, 0.25], [0.25, 0.5, 0.25]);
    expect(isFixed(ask(eighths, { tolerance: 0 }), "direct")).toBe(true);
    expect(isFixed(ask(eighths, { tolerance: 0 }), "separable")).toBe(true);
    // One tap of 1 and a thousand small ones: the large one leaves 14 bits, too few for the others together.
    const peaked = kernel(Array.from({ length: 33 }, (_, j) => Array.from({ length: 33 }, (_, i) => (j === 16 && i === 16 ? 1 : 0.0000301 * ((i * j) % 7)))));
    expect(isFixed(ask(peaked), "direct")).toBe(false);
    expect(isFixed(ask(peaked, { tolerance: 8 }), "direct")).toBe(true);
  });

  test("the bound is the error on purpose: within the tolerance, and 0 where taps need no rounding", () => {
    for (const build of builds) {
      for (const tolerance of [0, 1 / 16, 0.5, 2]) {
        for (const taps of [irregular, smooth, outer([1, 2, 1], [1, 0, -1])]) {
          for (const { arithmetic, errorBound } of applicable(build, ask(taps, { tolerance }))) {
            if (arithmetic.startsWith("fixed point")) expect(errorBound).toBeLessThanOrEqual(tolerance);
          }
        }
      }
    }
    const [sobel] = applicable("simd", ask(outer([1, 2, 1], [1, 0, -1]), { tolerance: 0, output: { gain: 0.125, offset: 128 } }));
    expect([sobel!.method, sobel!.errorBound]).toEqual(["direct", 0]);
  });
});

describe("at its edges", () => {
  /** All taps are the largest of 16 bits at the finest shift, and so many that white reaches almost 2³¹. */
  const full = kernel(Array.from({ length: 16 }, () => Array.from({ length: 16 }, (_, i) => (i === 0 ? 32766 : 32767) / 2 ** 23)));
  const white = { data: new Uint8Array(20 * 9).fill(255), width: 20, height: 9, channels: 1 as const };

  test.each([
    ["up to the last unit below 2³¹", full, 0],
    ["an offset that takes it past 2³¹ costs a bit of the taps", full, 30.75],
    ["down to −2³¹", scaled(full, -1), 255],
  ])("sums of 32 bits: %s", (_, taps, offset) => {
    const question: Question = { image: white, kernel: taps, options: { method: "direct", tolerance: 1, output: { offset } } };
    expect(isFixed(question, "direct")).toBe(true);
    const { defined, disagreement } = judge(question.image, taps, question.options);
    for (const build of builds) {
      const { errorBound } = applicable(build, question).find(({ method }) => method === "direct")!;
      expect(disagreement({ ...defined, data: run(build, question, "direct").data }, errorBound), build).toBeUndefined();
    }
  });

  test.each([1, 1 / 2, 1 / 4, 1 / 8, 1 / 16, -1 / 8])("sums of 32 bits along rows, half a unit of the last place included: white times %d", (gain) => {
    for (const offset of [0, 100, 254.5]) {
      for (const taps of [outer([1], [0.5, 0.5]), outer([0.25, 0.5, 0.25], [0.125, 0.75, 0.125]), gaussian({ sigma: 3 })]) {
        const question: Question = { image: white, kernel: taps, options: { output: { gain, offset } } };
        const { defined, disagreement } = judge(question.image, taps, question.options);
        for (const build of builds) {
          const { errorBound } = applicable(build, question).find(({ method }) => method === "separable")!;
          expect(disagreement({ ...defined, data: run(build, question, "separable").data }, errorBound), `${build} ${offset}`).toBeUndefined();
        }
      }
    }
  });

  test("a sum that is exact stays exact, ties up: the mean of every pair of bytes", () => {
    const data = Uint8Array.from({ length: 256 * 512 }, (_, k) => (k % 2 === 0 ? Math.floor(k / 512) : Math.floor((k % 512) / 2)));
    const expected = Uint8Array.from({ length: 256 * 511 }, (_, k) => {
      const at = Math.floor(k / 511) * 512 + (k % 511);
      return Math.floor((data[at]! + data[at + 1]! + 1) / 2);
    });
    const question: Question = {
      image: { data, width: 512, height: 256, channels: 1 },
      kernel: kernel([0.5, 0.5]),
      options: { extent: "valid", tolerance: 0 },
    };
    for (const method of ["direct", "separable"] as const) {
      expect(isFixed(question, method)).toBe(true);
      for (const build of builds) expect(firstDifference(run(build, question, method).data, expected), `${build} ${method}`).toBeUndefined();
    }
  });

  test("sums that single precision would keep exact are not given to taps or words that would not", () => {
    // 255 · 2¹⁶ needs 24 bits: exact in floats, one bit too many for 16-bit column sums.
    const nine = [1, 8, 28, 56, 70, 56, 28, 8, 1].map((tap) => tap / 256);
    const question = ask(outer(nine, nine));
    const { exact } = judge(question.image, question.kernel, question.options).defined;
    const expected = Array.from(exact, (y) => Math.floor(y + 0.5));
    for (const build of builds) expect(Array.from(run(build, question, "separable").data), build).toEqual(expected);
  });

  test("a flat image stays as it is, whatever its value and the kernel", () => {
    for (const taps of [gaussian({ sigma: 0.8 }), smooth, gaussian({ sigma: 9 })]) {
      for (let value = 0; value < 256; value += 15) {
        const flat: Question = { image: { data: new Uint8Array(24 * 7).fill(value), width: 24, height: 7, channels: 1 }, kernel: taps };
        for (const method of ["direct", "separable"] as const) expect(new Set(run("simd", flat, method).data)).toEqual(new Set([value]));
      }
    }
  });
});

test("both builds give the same bytes at every width, height and number of channels, for odd and even kernels", () => {
  const next = noise(31);
  const upTo = (most: number): number => 1 + Math.floor(next() * most);
  for (let k = 0; k < 120; k++) {
    const [m, n] = [upTo(12), upTo(12)];
    const vector = (taps: number): number[] => Array.from({ length: taps }, () => next() / taps);
    const taps = k % 2 === 0 ? scaled(noiseKernel(m, n, k), 1 / (m * n)) : outer(vector(n), vector(m));
    const channels = ((k % 4) + 1) as 1 | 2 | 3 | 4;
    const question = ask(
      taps,
      { border: (["replicate", "zero", { constant: 9 }, "whole-sample-symmetric"] as const)[k % 4]!, tolerance: 0.25 },
      channels,
      upTo(40),
      upTo(20),
    );
    const method = k % 2 === 0 ? "direct" : "separable";
    expect(isFixed(question, method), `${m}×${n}`).toBe(true);
    const [simd, scalar] = [run("simd", question, method).data, run("scalar", question, method).data];
    const where = `${m}×${n} taps on ${question.image.width}×${question.image.height}×${channels}`;
    expect(firstDifference(scalar, simd), where).toBeUndefined();
    const { defined, disagreement } = judge(question.image, taps, question.options);
    const { errorBound } = applicable("simd", question).find((found) => found.method === method)!;
    expect(disagreement({ ...defined, data: simd }, errorBound), where).toBeUndefined();
  }
});
