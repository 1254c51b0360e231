import { describe, expect, test } from "vitest";
import { kernel, scaled } from "../../src/kernels/index.js";
import { allAnswers, engineAnswers } from "../support/answers.js";
import { difference, magnitudeOf } from "../support/publishedCase.js";
import { plane, type Question } from "../support/questions.js";
import { noiseImage } from "../support/noise.js";

/**
 * A step through the area-sampled Gaussian of σ = 1/√2 is ½ (1 + erf(n + ½)) exactly.
 *
 * Source   M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions, Table 7.1: erf 0.5, 1.5, 2.5 (recomputed; the table's place from memory)
 */
describe("edge response", () => {
  /** erf(x), x = ½, 3/2, 5/2, …: ten decimals; beyond it differs from 1 by less than 10⁻⁶. */
  const erf = [0.5204998778, 0.9661051465, 0.999593048, 0.9999992569];
  const area = [2 * erf[0]!, erf[1]! - erf[0]!, erf[2]! - erf[1]!, erf[3]! - erf[2]!].map((span) => span / 2);
  const taps = [area[3]!, area[2]!, area[1]!, area[0]!, area[1]!, area[2]!, area[3]!];
  const step = Array.from({ length: 16 }, (_, n) => (n < 8 ? 0 : 1));
  const expected = new Map([
    [-1, 0.2397500611],
    [0, 0.7602499389],
    [1, 0.9830525733],
    [2, 0.999796524],
  ]);
  test("½ (1 + erf(n + ½))", () => {
    for (const answer of allAnswers({ image: plane([step]), kernel: kernel([taps]) })) {
      for (const [n, value] of expected) {
        // Taps end after n = 3, where erf is 1 to 7.5·10⁻⁷.
        expect(Math.abs(answer.data[8 + n]! - value), `${answer.from} at ${n}`).toBeLessThanOrEqual(answer.errorBound + 0.5e-10 * 8 + (1 - erf[3]!));
      }
    }
  });
});

/** Source   A. Savitzky, M. J. E. Golay, Anal. Chem. 36(8):1627–1639, 1964, smoothing tables (re-derived); cubics pass unchanged. */
describe("Savitzky–Golay smoothing passes cubics", () => {
  const tables: [taps: number[], divisor: number][] = [
    [[-3, 12, 17, 12, -3], 35],
    [[-2, 3, 6, 7, 6, 3, -2], 21],
    [[-21, 14, 39, 54, 59, 54, 39, 14, -21], 231],
    [[-36, 9, 44, 69, 84, 89, 84, 69, 44, 9, -36], 429],
  ];
  test.each(tables)("%j / %i", (taps, divisor) => {
    const cubic = Array.from({ length: 24 }, (_, n) => ((n - 9) ** 3 - 40 * (n - 9)) / 8);
    const half = (taps.length - 1) / 2;
    const question: Question = { image: plane([cubic]), kernel: scaled(kernel([taps]), 1 / divisor), options: { extent: "valid" } };
    for (const answer of allAnswers(question)) expect(difference(answer, cubic.slice(half, 24 - half), magnitudeOf(question))).toBeUndefined();
  });

  test("first derivative, laid on the image", () => {
    const parabola = Array.from({ length: 12 }, (_, n) => n * n);
    const question: Question = { image: plane([parabola]), kernel: scaled(kernel([[-2, -1, 0, 1, 2]]), 1 / 10), options: { extent: "valid" }, correlate: true };
    const slopes = Array.from({ length: 8 }, (_, n) => 2 * (n + 2));
    for (const answer of allAnswers(question)) expect(difference(answer, slopes, magnitudeOf(question))).toBeUndefined();
  });
});

/**
 * Source   A. V. Oppenheim, R. W. Schafer, Discrete-Time Signal Processing, ch. 8 (the Dirichlet kernel; the gain at frequency zero): a centred
 *          box of length L answers cos(2πkn/N) with sin(πkL/N) / sin(πk/N).
 */
describe("transform identities", () => {
  const dirichlet: [count: number, length: number, gains: number[]][] = [
    [8, 3, [3, 1 + Math.SQRT2, 1, 1 - Math.SQRT2, -1, 1 - Math.SQRT2, 1, 1 + Math.SQRT2]],
    [16, 5, [5, 4.2619726274, 2.4142135624, 0.3511533024, -1, -1.1795804271, -0.4142135624, 0.5664544974, 1]],
  ];
  test.each(dirichlet)("%i points, box of %i", (count, length, gains) => {
    const ones = kernel([Array.from({ length }, () => 1)]);
    gains.forEach((gain, k) => {
      const wave = Array.from({ length: count }, (_, n) => Math.cos((2 * Math.PI * k * n) / count));
      const question: Question = { image: plane([wave]), kernel: ones, options: { border: "periodic" } };
      const rounding = (length + Math.abs(gain)) * 2 ** -24 + 0.5e-10;
      for (const answer of allAnswers(question))
        expect(
          difference(
            answer,
            wave.map((value) => gain * value),
            1,
            rounding,
          ),
        ).toBeUndefined();
    });
  });

  test("a stripe pattern of period 3 vanishes under a box of 3, period 2 inverts", () => {
    const third = scaled(kernel([[1, 1, 1]]), 1 / 3);
    const stripes = (period: number[]): number[] => Array.from({ length: 12 }, (_, n) => period[n % period.length]!);
    for (const answer of allAnswers({ image: plane([stripes([1, 0, -1])]), kernel: third, options: { border: "periodic" } })) {
      expect(difference(answer, stripes([0]))).toBeUndefined();
    }
    for (const answer of allAnswers({ image: plane([stripes([1, -1])]), kernel: third, options: { border: "periodic" } })) {
      expect(difference(answer, stripes([-1 / 3, 1 / 3]))).toBeUndefined();
    }
  });

  test("the sum of a result is Σh · Σx with the periodic border", () => {
    const image = noiseImage("u8", 21, 14, 1, 44);
    const taps = kernel([
      [1, -2, 5],
      [0, 3, 4],
    ]);
    const total = Array.from(image.data).reduce((sum, value) => sum + value, 0) * taps.sum;
    for (const answer of engineAnswers({ image, kernel: taps, options: { border: "periodic", output: { sample: "f32" } } })) {
      const sum = Array.from(answer.data).reduce((partial, value) => partial + value, 0);
      expect(Math.abs(sum - total), answer.from).toBeLessThanOrEqual(answer.errorBound * answer.data.length);
    }
  });
});

/** Source   Finite differences on polynomials; the stencil [1 4 1; 4 −20 4; 1 4 1] / 6 is due to L. Collatz, and gives 0 on harmonic quartics. */
describe("Laplacian stencils on polynomials", () => {
  const stencils: [name: string, rows: number[][], divisor: number, results: [quartic: number, mixed: number, harmonic: number]][] = [
    [
      "five points",
      [
        [0, 1, 0],
        [1, -4, 1],
        [0, 1, 0],
      ],
      1,
      [2, 0, 4],
    ],
    [
      "eight neighbours / 3",
      [
        [1, 1, 1],
        [1, -8, 1],
        [1, 1, 1],
      ],
      3,
      [2, 4 / 3, -4],
    ],
    [
      "diagonal / 2",
      [
        [1, 0, 1],
        [0, -4, 0],
        [1, 0, 1],
      ],
      2,
      [2, 2, -8],
    ],
    [
      "Mehrstellen / 6",
      [
        [1, 4, 1],
        [4, -20, 4],
        [1, 4, 1],
      ],
      6,
      [2, 2 / 3, 0],
    ],
    [
      "Oono–Puri / 4",
      [
        [1, 2, 1],
        [2, -12, 2],
        [1, 2, 1],
      ],
      4,
      [2, 1, -2],
    ],
  ];
  test.each(stencils)("%s", (_, rows, divisor, [quartic, mixed, harmonic]) => {
    const around = [-1, 0, 1];
    const sampled = (f: (x: number, y: number) => number): number[][] => around.map((y) => around.map((x) => f(x, y)));
    const polynomials: [f: (x: number, y: number) => number, result: number][] = [
      [(x) => x ** 4, quartic],
      [(x, y) => x * x * y * y, mixed],
      [(x, y) => x ** 4 - 6 * x * x * y * y + y ** 4, harmonic],
      [(x) => x * x, 2],
      [(x, y) => x * x + y * y, 4],
      [(x, y) => x * y + 3 * x - y + 2, 0],
    ];
    for (const [f, result] of polynomials) {
      const question: Question = { image: plane(sampled(f)), kernel: kernel(rows), options: { extent: "valid" } };
      for (const answer of allAnswers(question)) expect(difference(answer, [divisor * result], magnitudeOf(question), 1e-12)).toBeUndefined();
    }
  });

  /** Source   D. Marr, E. Hildreth, Theory of edge detection, Proc. R. Soc. B 207:187–217, 1980 (the operator); the integer mask is common practice. */
  test("the 9 × 9 integer Laplacian of Gaussian answers a flat image with exactly 0", () => {
    const upper = [
      [0, 1, 1, 2, 2, 2, 1, 1, 0],
      [1, 2, 4, 5, 5, 5, 4, 2, 1],
      [1, 4, 5, 3, 0, 3, 5, 4, 1],
      [2, 5, 3, -12, -24, -12, 3, 5, 2],
    ];
    const mask = kernel([...upper, [2, 5, 0, -24, -40, -24, 0, 5, 2], ...upper.toReversed()]);
    expect(mask.sum).toBe(0);
    const flat = { data: new Uint8Array(15 * 12).fill(255), width: 15, height: 12, channels: 1 as const };
    for (const answer of engineAnswers({ image: flat, kernel: mask, options: { output: { sample: "f32" } } })) {
      // Several separable terms sum to 0 only within their bound.
      const errorBound = answer.terms === 1 ? 0 : answer.errorBound;
      expect(difference({ ...answer, errorBound }, new Float64Array(15 * 12))).toBeUndefined();
    }
  });
});

/** Source   ISO/IEC 15444-1 (JPEG 2000) Annex F: analysis, decimation, synthesis with periodic whole-sample symmetric extension reconstruct exactly (taps from memory and recomputed). */
describe("JPEG 2000 filters reconstruct", () => {
  const signal = [10, 12, 15, 20, 25, 25, 20, 10, 5];
  const pass = (values: number[], taps: number[], from: number): number[] => {
    const answers = engineAnswers({ image: plane([values]), kernel: kernel([taps]), options: { border: "whole-sample-symmetric" } });
    return Array.from(answers[from]!.data);
  };
  test("5/3, every method", () => {
    const ways = engineAnswers({ image: plane([signal]), kernel: kernel([[-0.125, 0.25, 0.75, 0.25, -0.125]]) });
    ways.forEach(({ from, errorBound }, index) => {
      const low = pass(signal, [-0.125, 0.25, 0.75, 0.25, -0.125], index).map((value, n) => (n % 2 === 0 ? value : 0));
      const high = pass(signal, [-0.5, 1, -0.5], index).map((value, n) => (n % 2 === 1 ? value : 0));
      const smooth = pass(low, [0.5, 1, 0.5], index);
      const detail = pass(high, [-0.125, -0.25, 0.75, -0.25, -0.125], index);
      const back = smooth.map((value, n) => value + detail[n]!);
      // Four passes of gain 2 at most, on values up to 25.
      back.forEach((value, n) => expect(Math.abs(value - signal[n]!), from).toBeLessThanOrEqual(8 * 26 * errorBound));
    });
  });
});
