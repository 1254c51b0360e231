import fc from "fast-check";
import { describe, expect, test } from "vitest";
import {
  binomial,
  box,
  differenceOfGaussians,
  disk,
  gaussian,
  kernel,
  type Kernel,
  laplacian,
  laplacianOfGaussian,
  line,
  outer,
  prewitt,
  reversed,
  scharr,
  sharpen,
  sobel,
  unsharp,
} from "../../src/kernels/index.js";
import { resultAt, rowsOf, weightOf } from "./resultAt.js";

const sigmas = [0, 0.2, 0.35, 0.5, 0.8, 1, 1.4, 2, 2.7, 3, 5.5, 10, 33];
const stencils = ["cross", "square", "diagonal", "mehrstellen", "oono-puri"] as const;

/** Every smoothing builder over its options. */
const smoothing: [name: string, made: Kernel][] = [
  ...sigmas.flatMap((sigma): [string, Kernel][] => [
    [`gaussian ${sigma}, point`, gaussian({ sigma })],
    [`gaussian ${sigma}, area`, gaussian({ sigma, sampling: "area" })],
    [`gaussian ${sigma} along rows`, gaussian({ sigma: { x: sigma, y: 0 } })],
  ]),
  ...[0, 1, 2, 3, 8, 31, 56, 57, 100, 501, 1000].map((order): [string, Kernel] => [`binomial ${order}`, binomial({ order: { x: order, y: 2 } })]),
  ...[1, 2, 3, 7, 10, 49, 101].map((width): [string, Kernel] => [`box ${width}`, box(width)]),
  ...[0.2, 0.5, 0.9, 1, 2.5, 8, 30.2].flatMap((radius): [string, Kernel][] => [
    [`disk ${radius}, area`, disk(radius)],
    [`disk ${radius}, point`, disk({ radius, sampling: "point" })],
  ]),
  ...[0.3, 1, 4, 5, 15, 80.5].flatMap((length) =>
    [0, 30, 45, 90, 123.4].map((angle): [string, Kernel] => [`line ${length} at ${angle}°`, line({ length, angleInDegrees: angle })]),
  ),
];

/** Builders whose results vanish on flat areas. */
const differences: [name: string, made: Kernel][] = [
  ...stencils.map((stencil): [string, Kernel] => [`laplacian ${stencil}`, laplacian(stencil)]),
  ...[0.3, 0.5, 1, 1.4, 2, 3.3, 10].flatMap((sigma): [string, Kernel][] => [
    [`laplacianOfGaussian ${sigma}`, laplacianOfGaussian(sigma)],
    [`differenceOfGaussians ${sigma}`, differenceOfGaussians(sigma)],
    [`differenceOfGaussians ${sigma}, area`, differenceOfGaussians({ sigma, sampling: "area", ratio: 2 })],
  ]),
];

const sharpening: [name: string, made: Kernel][] = [
  ...stencils.map((stencil): [string, Kernel] => [`sharpen ${stencil}`, sharpen({ stencil, amount: 0.7 })]),
  ...[0.5, 1, 2, 10].map((sigma): [string, Kernel] => [`unsharp ${sigma}`, unsharp({ sigma, amount: 1.3 })]),
];

function plainSum(values: Iterable<number>): number {
  let sum = 0;
  for (const value of values) sum += value;
  return sum;
}

/** Whether turning rows into columns, and mirroring, give the same bits. */
function hasSquareSymmetry({ width, height, taps }: Kernel): boolean {
  return taps.every((tap, k) => {
    const x = k % width;
    const y = (k - x) / width;
    return tap === taps[x * width + y] && tap === taps[y * width + width - 1 - x] && tap === taps[(height - 1 - y) * width + x];
  });
}

describe("smoothing builders", () => {
  test.each(smoothing)("%s sums to 1 within 1 ulp and has no negative tap", (_, made) => {
    expect(Math.abs(made.sum - 1)).toBeLessThanOrEqual(2 ** -52);
    expect(made.taps.every((tap) => tap >= 0)).toBe(true);
  });

  test.each(smoothing.filter(([, made]) => made.width % 2 === 1 && made.height % 2 === 1))("%s looks the same turned by 180°", (_, made) => {
    expect(reversed(made).taps).toEqual(made.taps);
    expect(reversed(made).origin).toEqual(made.origin);
  });

  test("for any sigma and radius the vectors of a Gaussian sum to 1 exactly", () => {
    const options = fc.record({
      sigma: fc.double({ min: 0, max: 40, noNaN: true }),
      radius: fc.nat(60),
      sampling: fc.constantFrom("point" as const, "area" as const),
    });
    fc.assert(
      fc.property(options, ({ sigma, radius, sampling }) => {
        const { sum } = gaussian({ sigma: { x: sigma, y: 0 }, radius: { x: radius, y: 0 }, sampling });
        return sum === 1;
      }),
    );
  });
});

describe("builders of differences", () => {
  test.each(differences)("%s sums to exactly 0, in any order", (_, made) => {
    expect(made.sum).toBe(0);
    expect(plainSum(made.taps)).toBe(0);
    expect(plainSum(made.taps.slice().sort())).toBe(0);
    expect(plainSum(made.taps.slice().reverse())).toBe(0);
  });

  test.each(differences)("%s has the symmetries of the square", (_, made) => {
    expect(hasSquareSymmetry(made)).toBe(true);
  });
});

describe("sharpening builders", () => {
  test.each(sharpening)("%s sums to 1 within 1 ulp and has the symmetries of the square", (_, made) => {
    expect(Math.abs(made.sum - 1)).toBeLessThanOrEqual(2 ** -52);
    expect(hasSquareSymmetry(made)).toBe(true);
  });

  test("are the identity with amount 0", () => {
    const ramp = (x: number, y: number): number => 3 * x - 5 * y + 11;
    expect(resultAt(sharpen(0), ramp, 4, 9)).toBe(ramp(4, 9));
    expect(resultAt(unsharp({ sigma: 2, amount: 0 }), ramp, 4, 9)).toBe(ramp(4, 9));
  });

  test("unsharp is 1 + amount times the identity less amount times the Gaussian, tap by tap", () => {
    const blur = gaussian({ sigma: 1.5 });
    const made = unsharp({ sigma: 1.5, amount: 0.5 });
    const middle = (blur.taps.length - 1) / 2;
    made.taps.forEach((tap, k) => expect(Math.abs(tap - (k === middle ? 1.5 : 0) + 0.5 * blur.taps[k]!)).toBeLessThanOrEqual(2 ** -52));
  });
});

describe("gaussian", () => {
  test("is the outer product of its vectors, bit for bit", () => {
    const row = gaussian({ sigma: { x: 1.7, y: 0 } });
    const column = gaussian({ sigma: { x: 0, y: 2.2 } });
    expect(gaussian({ sigma: { x: 1.7, y: 2.2 } }).taps).toEqual(outer(column.taps, row.taps).taps);
  });

  test("has the symmetries of the square where both sigmas are one", () => {
    expect(hasSquareSymmetry(gaussian(2.3))).toBe(true);
    expect(hasSquareSymmetry(gaussian({ sigma: 2.3, sampling: "area" }))).toBe(true);
  });

  test("reaches ⌈4σ⌉ unless told", () => {
    expect(gaussian(1.1)).toMatchObject({ width: 11, height: 11 });
    expect(gaussian({ sigma: 2, radius: 3 })).toMatchObject({ width: 7, height: 7 });
    expect(gaussian({ sigma: { x: 2, y: 1 }, radius: { x: 3, y: 0 } })).toMatchObject({ width: 7, height: 1 });
  });

  test("of sigma 0 leaves an image as it is", () => {
    expect(rowsOf(gaussian(0))).toEqual([[1]]);
    expect(rowsOf(gaussian({ sigma: 0, radius: 1 }))).toEqual([
      [0, 0, 0],
      [0, 1, 0],
      [0, 0, 0],
    ]);
    expect(rowsOf(gaussian(1e-200))[1]).toEqual([0, 1, 0]);
  });

  test("falls from the middle, whatever the sampling", () => {
    for (const sampling of ["point", "area"] as const) {
      const { taps, origin } = gaussian({ sigma: { x: 3, y: 0 }, radius: { x: 20, y: 0 }, sampling });
      for (let k = origin.x; k < taps.length - 1; k++) expect(taps[k + 1]).toBeLessThan(taps[k]!);
    }
  });
});

describe("disk and line", () => {
  test("a disk has the symmetries of the square and reaches ⌈radius − ½⌉", () => {
    for (const radius of [0.5, 0.51, 1, 2.5, 2.6, 17.3]) {
      expect(hasSquareSymmetry(disk(radius))).toBe(true);
      expect(disk(radius).width).toBe(2 * Math.ceil(radius - 0.5) + 1);
    }
  });

  test("a disk sampled at points counts the lattice points of Gauss's circle problem", () => {
    // N(r) = 5, 13, 29, 49, 81 for r = 1 … 5 (OEIS A000328).
    [5, 13, 29, 49, 81].forEach((count, k) => {
      expect(disk({ radius: k + 1, sampling: "point" }).taps.filter((tap) => tap > 0).length).toBe(count);
    });
  });

  test("a line along a row or a column is a box with cut ends", () => {
    expect(rowsOf(line(5))).toEqual([[0.2, 0.2, 0.2, 0.2, 0.2]].map((row) => row.map((tap) => expect.closeTo(tap, 15))));
    expect(rowsOf(line(4))).toEqual([[0.125, 0.25, 0.25, 0.25, 0.125]]);
    expect(rowsOf(line({ length: 2, angleInDegrees: 90 }))).toEqual([[0.25], [0.5], [0.25]]);
    expect(rowsOf(line({ length: 2, angleInDegrees: -270 }))).toEqual([[0.25], [0.5], [0.25]]);
  });

  test("a line turns counter-clockwise as seen", () => {
    const rising = rowsOf(line({ length: 3, angleInDegrees: 45 }));
    expect(rising[0]![2]).toBeGreaterThan(0);
    expect(rising[2]![0]).toBe(rising[0]![2]);
    expect(rising[0]![0]).toBe(0);
    expect(line({ length: 9, angleInDegrees: 210 }).taps).toEqual(line({ length: 9, angleInDegrees: 30 }).taps);
  });

  test("a line keeps its second moment: length² / 12 along it, and 1/12 or less from the squares it is gathered into", () => {
    for (const angle of [0, 10, 30, 45, 77]) {
      const made = line({ length: 40, angleInDegrees: angle });
      const radians = (angle * Math.PI) / 180;
      const along = resultAt(made, (x, y) => (x * Math.cos(radians) - y * Math.sin(radians)) ** 2);
      // |position − square's middle| ≤ √½, weighted by a mean distance of 10: |change| ≤ 2 · 10 · √½ + ½ at the very most.
      expect(Math.abs(along - 1600 / 12), `${angle}°`).toBeLessThan(2 * 10 * Math.SQRT1_2 + 0.5);
    }
  });
});

describe("gradients", () => {
  const masks = [
    [sobel, 8],
    [prewitt, 6],
    [scharr, 32],
  ] as const;

  test.each(masks)("%o rises with the ramp to the right and downwards, and only with its own", (mask, gain) => {
    const x = mask({ axis: "x" });
    const y = mask("y");
    expect(resultAt(x, (column) => column, 5, 3)).toBe(gain);
    expect(resultAt(y, (_, row) => row, 5, 3)).toBe(gain);
    expect(resultAt(x, (_, row) => row, 5, 3)).toBe(0);
    expect(resultAt(y, (column) => column, 5, 3)).toBe(0);
    expect(x.sum).toBe(0);
  });

  test("scharr's direction is off by at most 0.3° for waves down to 4 samples", () => {
    let worst = 0;
    for (let length = 4; length <= 32; length *= 2) {
      for (let degrees = 0; degrees <= 45; degrees++) {
        const angle = (degrees * Math.PI) / 180;
        const wave = (x: number, y: number): number => Math.sin(((2 * Math.PI) / length) * (x * Math.cos(angle) + y * Math.sin(angle)));
        const found = Math.atan2(resultAt(scharr("y"), wave), resultAt(scharr("x"), wave));
        worst = Math.max(worst, Math.abs(found - angle) * (180 / Math.PI));
      }
    }
    expect(worst).toBeLessThan(0.3);
  });
});

describe("laplacianOfGaussian and differenceOfGaussians", () => {
  test("the taps of the first are those of the formula with 2σ² but for 2·10⁻⁵ of the square", () => {
    for (const sigma of [1, 1.4, 2, 5]) {
      const made = laplacianOfGaussian(sigma);
      const middle = made.taps[(made.taps.length - 1) / 2]!;
      const ideal = -1 / (Math.PI * sigma ** 4);
      expect(Math.abs(middle / ideal - 1), `sigma ${sigma}`).toBeLessThan(2e-5);
    }
  });

  test("the second is the difference of two Gaussians of its reach", () => {
    const made = differenceOfGaussians({ sigma: 1, ratio: 2, radius: 6 });
    const narrow = gaussian({ sigma: 1, radius: 6 }).taps;
    const wide = gaussian({ sigma: 2, radius: 6 }).taps;
    // Taps move by at most 2⁻⁵² · Σ|taps|, the middle one by as much for each of the others.
    const slack = 2 ** -52 * weightOf(made) * made.taps.length;
    made.taps.forEach((tap, k) => expect(Math.abs(tap - (narrow[k]! - wide[k]!))).toBeLessThanOrEqual(slack));
    expect(made.taps[(made.taps.length - 1) / 2]).toBeGreaterThan(0);
  });
});

test("bare numbers and words stand for the main option", () => {
  const same = (a: Kernel, b: Kernel): void => expect(JSON.stringify(a)).toBe(JSON.stringify(b));
  same(box(3), box({ width: 3, height: 3 }));
  same(
    binomial(2),
    kernel(
      [
        [1, 2, 1],
        [2, 4, 2],
        [1, 2, 1],
      ].map((row) => row.map((tap) => tap / 16)),
    ),
  );
  same(gaussian(1.5), gaussian({ sigma: 1.5 }));
  same(laplacian("square"), laplacian({ stencil: "square" }));
  same(laplacianOfGaussian(2), laplacianOfGaussian({ sigma: 2, radius: 10 }));
  same(differenceOfGaussians(1), differenceOfGaussians({ sigma: 1, ratio: 1.6, radius: 7 }));
  same(sharpen(2), sharpen({ amount: 2, stencil: "cross" }));
  same(unsharp(1), unsharp({ sigma: 1, amount: 1 }));
  same(disk(3), disk({ radius: 3, sampling: "area" }));
  same(line(6), line({ length: 6, angleInDegrees: 0 }));
});
