import { describe, expect, test } from "vitest";
import { delta, kernel, outer } from "../../src/kernels/index.js";
import type { Alpha, Border, ConvolveOptions, Raster } from "../../src/index.js";
import { allAnswers } from "../support/answers.js";
import { difference } from "../support/publishedCase.js";
import { bytePlane, plane, type Question } from "../support/questions.js";

/** Every answer, the definition's among them, must be these numbers; divisions may round. */
function check(question: Question, expected: number[], rounding = 0): void {
  const answers = allAnswers(question);
  expect(answers.length).toBeGreaterThan(1);
  for (const answer of answers) expect(difference(answer, expected, 16, rounding)).toBeUndefined();
}

const ones = kernel([
  [1, 1, 1],
  [1, 1, 1],
  [1, 1, 1],
]);
const square = plane([
  [1, 1],
  [1, 1],
]);

describe("each axis has its own rule, and rows are resolved first", () => {
  test("a constant above and below decides the corners", () => {
    const options: ConvolveOptions = { border: { rows: { constant: 9 }, columns: "zero" } };
    // Each result: four ones, three nines above or below, two zeros beside.
    check({ image: square, kernel: ones, options }, [31, 31, 31, 31]);
    check({ image: square, kernel: ones, options: { border: { rows: "zero", columns: { constant: 9 } } } }, [22, 22, 22, 22]);
  });

  test("renormalised columns divide only by what the rows left in; a row of zeros counts with its weight", () => {
    // Weight inside: three taps of the zero row and two of each row inside.
    const zeroRows = (9 * 4) / 7;
    check({ image: square, kernel: ones, options: { border: { rows: "zero", columns: "renormalised" } } }, [zeroRows, zeroRows, zeroRows, zeroRows], 2 ** -22);
    // Rows outside are left out wholly; columns outside replicate: six ones of weight six.
    check({ image: square, kernel: ones, options: { border: { rows: "renormalised" } } }, [9, 9, 9, 9], 2 ** -20);
  });

  test("an axis that is not named replicates", () => {
    check(
      {
        image: plane([
          [1, 2],
          [3, 4],
        ]),
        kernel: kernel([[1, 0, 0]]),
        options: { border: { rows: "zero" } },
      },
      [2, 2, 4, 4],
    );
    check(
      {
        image: plane([
          [1, 2],
          [3, 4],
        ]),
        kernel: kernel([[1], [0], [0]]),
        options: { border: { rows: "zero" } },
      },
      [3, 4, 0, 0],
    );
  });
});

describe("renormalised", () => {
  test("a mean is the mean of what is there", () => {
    const third = kernel([[1 / 3, 1 / 3, 1 / 3]]);
    check({ image: plane([[1, 2, 6]]), kernel: third, options: { border: "renormalised" } }, [1.5, 3, 4], 2 ** -22);
  });
  test("a tail of the kernel that alone is inside counts for all of it, however small", () => {
    const image = bytePlane([[200]]);
    const taps = kernel([[1e-18], [1], [1e-12]]);
    for (const answer of allAnswers({ image, kernel: taps, options: { border: "renormalised", extent: "full" } })) {
      // A transform's error is global: where its bound is too large to tell the tail, the result is free.
      if (answer.errorBound < 0.5 || !answer.from.includes("fft")) expect(Array.from(answer.data), answer.from).toEqual([200, 200, 200]);
    }
  });
  test("the sum of taps stays what it is, and 0 where no weight fell inside", () => {
    const taps = kernel([[0, 2, 6]]);
    check({ image: plane([[1, 2]]), kernel: taps, options: { border: "renormalised", extent: "full" } }, [0, 8, 10, 16], 2 ** -20);
  });
  test("0 everywhere, by every method and without a tolerance, where no weight can fall inside", () => {
    const taps = outer([1], [1, 0, 0], { origin: { x: 2, y: 0 } });
    const question: Question = { image: plane([[1, 2]]), kernel: taps, options: { border: "renormalised", tolerance: 0 }, correlate: true };
    check(question, [0, 0], 2 ** -20);
    expect(allAnswers(question).some(({ from }) => from.includes("separable"))).toBe(true);
  });
});

describe("extents", () => {
  test("the first result of full and valid is the first position, whatever the origin", () => {
    for (const origin of [
      { x: 0, y: 0 },
      { x: 1, y: 0 },
      { x: 2, y: 0 },
    ]) {
      const taps = kernel([[1, 10, 100]], { origin });
      check({ image: plane([[1, 2, 3, 4]]), kernel: taps, options: { extent: "full", border: "zero" } }, [1, 12, 123, 234, 340, 400]);
      check({ image: plane([[1, 2, 3, 4]]), kernel: taps, options: { extent: "valid" } }, [123, 234]);
    }
  });
});

describe("how results are written", () => {
  test("integers as ⌊y + ½⌋, then clamped", () => {
    const half = kernel([[0.5]]);
    check({ image: bytePlane([[0, 1, 2, 3, 255]]), kernel: half }, [0, 1, 1, 2, 128]);
    check({ image: bytePlane([[0, 1, 2, 3, 255]]), kernel: half, options: { output: { gain: -1 } } }, [0, 0, 0, 0, 0]);
    check({ image: bytePlane([[0, 1, 2, 3, 255]]), kernel: half, options: { output: { gain: -1, offset: 2 } } }, [2, 2, 1, 1, 0]);
    check({ image: bytePlane([[200]]), kernel: kernel([[2]]) }, [255]);
  });
  test("nothing is rescaled between sample types unless the gain says so", () => {
    const image: Raster = { data: Uint16Array.of(0, 200, 256, 65535), width: 4, height: 1, channels: 1 };
    check({ image, kernel: delta(), options: { output: { sample: "u8" } } }, [0, 200, 255, 255]);
    check({ image, kernel: delta(), options: { output: { sample: "u8", gain: 1 / 257 } } }, [0, 1, 1, 255]);
  });
  test("alpha goes to the other type's full value; gain and offset leave it alone, except with none", () => {
    const image: Raster = { data: Uint8Array.of(100, 51), width: 1, height: 1, channels: 2 };
    const output = { sample: "u16", gain: 2, offset: 5 } as const;
    for (const alpha of ["straight", "keep"] as const) check({ image, kernel: delta(), options: { alpha, output } }, [205, 13107]);
    check({ image, kernel: delta(), options: { alpha: "premultiplied", output } }, [107, 13107]);
    check({ image, kernel: delta(), options: { alpha: "none", output } }, [205, 107]);
  });
});

describe("keep takes alpha at the same place of the bordered image", () => {
  const image: Raster = { data: Uint8Array.of(1, 10, 2, 20), width: 2, height: 1, channels: 2 };
  const alphaUnder = (border: Border): number[] => {
    const answers = allAnswers({ image, kernel: kernel([[1, 1, 1]]), options: { alpha: "keep" as Alpha, border, extent: "full" } });
    const alphas = answers.map(({ data }) => [1, 3, 5, 7].map((index) => data[index]!));
    for (const other of alphas) expect(other).toEqual(alphas[0]);
    return alphas[0]!;
  };
  test.each<[Border, number[]]>([
    ["replicate", [10, 10, 20, 20]],
    ["zero", [0, 10, 20, 0]],
    [{ constant: [0, 7] }, [7, 10, 20, 7]],
    ["periodic", [20, 10, 20, 10]],
    ["whole-sample-symmetric", [20, 10, 20, 10]],
    ["renormalised", [0, 10, 20, 0]],
  ])("%j", (border, expected) => expect(alphaUnder(border)).toEqual(expected));
});

describe("alpha", () => {
  test("straight averages colours by how much there is of them, the constant outside among them", () => {
    const image: Raster = { data: Uint8Array.of(100, 255, 200, 51), width: 2, height: 1, channels: 2 };
    const pair = kernel([[0.5, 0.5]]);
    // (100 · 1 + 200 · 0.2) / 1.2 = 116.67, alpha 0.6; then (200 · 0.2 + 40 · 0.4) / 0.6 = 93.33, alpha 0.3.
    check({ image, kernel: pair, options: { border: { constant: [40, 102] } }, correlate: true }, [117, 153, 93, 77]);
  });
  test("the default is keep where the taps sum to nothing, straight elsewhere, none without alpha", () => {
    const image: Raster = { data: Uint8Array.of(100, 255, 200, 0), width: 2, height: 1, channels: 2 };
    check({ image, kernel: kernel([[1, -1]]), options: { output: { offset: 50 } }, correlate: true }, [0, 255, 50, 0]);
    check({ image, kernel: kernel([[0.5, 0.5]]), correlate: true }, [100, 128, 0, 0]);
  });
});
