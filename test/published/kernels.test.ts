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
  type LaplacianStencil,
  prewitt,
  scaled,
  scharr,
  sobel,
} from "../../src/kernels/index.js";
import { resultAt, rowsOf, weightOf } from "../kernels/resultAt.js";

/** Rounding of a sum of products in double, for images up to `magnitude`. */
function slack(made: Kernel, magnitude: number): number {
  return 2 ** -52 * made.taps.length * weightOf(made) * magnitude;
}

/** A printed decimal stands for everything that rounds to it. */
function expectPrinted(found: number, printed: number, decimals: number, where: string): void {
  expect(Math.abs(found - printed), `${where}: ${found} for ${printed}`).toBeLessThanOrEqual(0.5 * 10 ** -decimals + 1e-15);
}

/** The middle tap and those to its right, along a row. */
function flank(made: Kernel): number[] {
  return Array.from(made.taps.slice(made.origin.y * made.width + made.origin.x, made.origin.y * made.width + made.width));
}

const alongRows = (sigma: number, radius: number, sampling: "point" | "area"): Kernel =>
  gaussian({ sigma: { x: sigma, y: 0 }, radius: { x: radius, y: 0 }, sampling });

/** Gain for the wave cos(2πfx): Σ taps · cos(2πf · offset), by symmetry real. */
function gain(made: Kernel, frequency: number): number {
  return resultAt(made, (x) => Math.cos(2 * Math.PI * frequency * x));
}

const variance = (made: Kernel): number => resultAt(made, (x) => x * x);

describe("Abramowitz & Stegun, Handbook of Mathematical Functions (NBS AMS 55), Table 7.1: differences of erf are the area-sampled Gaussian", () => {
  // w[k] = ½ · (erf((k + ½) / σ√2) − erf((k − ½) / σ√2)), computed to ten decimals with another library's erf.
  test.each([
    [0.5, [0.6826894921, 0.1573053559, 0.0013496114]],
    [1, [0.3829249225, 0.2417303375, 0.0605975359, 0.0059770362, 0.0002292314]],
    [2, [0.1974126514, 0.1746663219, 0.1209775787, 0.0655906168, 0.0278346842, 0.0092447094, 0.0024027382]],
    [3, [0.1323676652, 0.1252786287, 0.1062091578, 0.0806558764, 0.0548653033, 0.0334306937]],
  ] as const)("weights for sigma %d", (sigma, weights) => {
    const made = flank(alongRows(sigma, Math.ceil(9 * sigma), "area"));
    weights.forEach((weight, k) => expectPrinted(made[k]!, weight, 10, `w[${k}]`));
  });

  test("the step response with σ = 1/√2 is ½ · (1 + erf(n + ½)), with the table's own entries", () => {
    const made = alongRows(Math.SQRT1_2, 12, "area");
    const response = (n: number): number => resultAt(made, (x) => Number(x >= 0), n);
    const entries: [number, number][] = [
      [-1, -0.5204998778],
      [0, 0.5204998778],
      [1, 0.9661051465],
      [2, 0.999593048],
    ];
    for (const [n, erf] of entries) expectPrinted(2 * response(n) - 1, erf, 10, `n = ${n}`);
  });

  test("its variance is σ² + 1/12 (a box of one sample joins the bell), from sigma 2 on, where aliases are below rounding", () => {
    for (const sigma of [2, 3, 5]) {
      const made = alongRows(sigma, Math.ceil(10 * sigma), "area");
      expect(Math.abs(variance(made) - (sigma * sigma + 1 / 12))).toBeLessThan(slack(made, made.width ** 2));
    }
  });
});

describe("the sampled Gaussian", () => {
  // Heights of e^(−k² / 2σ²) over their sum, radius 4σ, computed with another library's exp.
  test.each([
    [1, [0.3989434694, 0.2419714457, 0.0539911274, 0.0044318616, 0.0001338306]],
    [2, [0.1994746479, 0.1760357589, 0.1209874898, 0.0647599366, 0.026995958]],
  ] as const)("weights for sigma %d and the default radius", (sigma, weights) => {
    const made = flank(gaussian({ sigma: { x: sigma, y: 0 } }));
    weights.forEach((weight, k) => expectPrinted(made[k]!, weight, 10, `w[${k}]`));
  });

  test("passes waves by e^(−2π²σ²f²), the Gaussian's own Fourier transform (Bracewell, The Fourier Transform and Its Applications; from memory)", () => {
    for (const sigma of [1, 2, 3]) {
      for (const frequency of [0.05, 0.1, 0.2]) {
        // Cutting at 4σ leaves out 6.4·10⁻⁵ of the weight, sampling adds the first alias e^(−2π²σ²(1−f)²) ≤ 4·10⁻⁶.
        const ideal = Math.exp(-2 * Math.PI ** 2 * sigma ** 2 * frequency ** 2);
        expect(Math.abs(gain(gaussian({ sigma: { x: sigma, y: 0 } }), frequency) - ideal)).toBeLessThan(2 * 6.4e-5);
      }
    }
  });

  test("area-sampled, waves are further weakened by the aperture sin(πf) / πf (common practice)", () => {
    for (const frequency of [0.05, 0.1, 0.2]) {
      const aperture = Math.sin(Math.PI * frequency) / (Math.PI * frequency);
      const ideal = Math.exp(-2 * Math.PI ** 2 * 4 * frequency ** 2) * aperture;
      expect(Math.abs(gain(alongRows(2, 20, "area"), frequency) - ideal)).toBeLessThan(1e-12);
    }
  });

  test("joins with another into one of the summed variances (semigroup; Lindeberg, IEEE TPAMI 12(3), 1990) from sigma 1.5 on", () => {
    const first = alongRows(1.5, 15, "point");
    const second = alongRows(2, 20, "point");
    const joined = alongRows(2.5, 35, "point");
    for (let n = 0; n <= 20; n++) {
      const found = resultAt(first, (x) => (Math.abs(x) <= 20 ? second.taps[x + 20]! : 0), n);
      expect(Math.abs(found - joined.taps[n + 35]!)).toBeLessThan(1e-12 * joined.taps[35]!);
    }
  });
});

describe("binomials", () => {
  test("are rows of Pascal's triangle", () => {
    expect(rowsOf(scaled(binomial({ order: { x: 4, y: 0 } }), 16))).toEqual([[1, 4, 6, 4, 1]]);
    expect(rowsOf(scaled(binomial({ order: { x: 0, y: 3 } }), 8))).toEqual([[1], [3], [3], [1]]);
    expect(rowsOf(scaled(binomial({ order: { x: 10, y: 0 } }), 1024))).toEqual([[1, 10, 45, 120, 210, 252, 210, 120, 45, 10, 1]]);
  });

  test("of orders 2 and 4 are the Gaussian filters of OpenVX 1.3.1 (Khronos): /16 and, in the pyramid, /256", () => {
    expect(rowsOf(scaled(binomial(2), 16))).toEqual([
      [1, 2, 1],
      [2, 4, 2],
      [1, 2, 1],
    ]);
    const row = [1, 4, 6, 4, 1];
    expect(rowsOf(scaled(binomial(4), 256))).toEqual(row.map((down) => row.map((along) => down * along)));
  });

  test("join exactly: B(m) ∗ B(n) = B(m + n), variance n / 4 (Burt & Adelson, IEEE Trans. COM-31(4), 1983, for order 4)", () => {
    for (const [m, n] of [
      [1, 1],
      [2, 2],
      [3, 8],
      [20, 30],
    ] as const) {
      const first = binomial({ order: { x: m, y: 0 } });
      const second = binomial({ order: { x: n, y: 0 } }).taps;
      const joined = binomial({ order: { x: m + n, y: 0 } });
      for (let k = 0; k <= m + n; k++) {
        const found = resultAt(first, (x) => second[x] ?? 0, k - first.origin.x);
        expect(found, `${m} ∗ ${n} at ${k}`).toBe(joined.taps[k]);
      }
      const mean = (m + n) / 2 - joined.origin.x;
      expect(resultAt(joined, (x) => (x + mean) ** 2)).toBeCloseTo((m + n) / 4, 12);
    }
  });
});

describe("derivative masks, laid on the image as printed (OpenVX 1.3.1: Sobel 3x3; Prewitt 1970 and Scharr 2000 from memory)", () => {
  const printed = [
    [
      "sobel",
      sobel,
      [
        [-1, 0, 1],
        [-2, 0, 2],
        [-1, 0, 1],
      ],
      8,
    ],
    [
      "prewitt",
      prewitt,
      [
        [-1, 0, 1],
        [-1, 0, 1],
        [-1, 0, 1],
      ],
      6,
    ],
    [
      "scharr",
      scharr,
      [
        [-3, 0, 3],
        [-10, 0, 10],
        [-3, 0, 3],
      ],
      32,
    ],
  ] as const;

  test.each(printed)("%s", (_, mask, table, rise) => {
    const transposed = table[0].map((_cell, i) => table.map((row) => row[i]!));
    const turned = (rows: readonly (readonly number[])[]): number[][] => rows.map((row) => [...row].reverse().map((tap) => tap + 0)).reverse();
    expect(rowsOf(mask({ axis: "x" }))).toEqual(turned(table));
    expect(rowsOf(mask({ axis: "y" }))).toEqual(turned(transposed));
    expect(resultAt(mask({ axis: "x" }), (x) => x)).toBe(rise);
    expect(resultAt(mask({ axis: "y" }), (_x, y) => y)).toBe(rise);
  });

  test("the example kernel of OpenVX's custom convolution, a true convolution: 32 on the ramp, 4 at scale 8", () => {
    const made = kernel([
      [3, 0, -3],
      [10, 0, -10],
      [3, 0, -3],
    ]);
    expect(resultAt(made, (x) => x) / 8).toBe(4);
    expect(made.taps).toEqual(scharr("x").taps);
  });
});

describe("Laplacian stencils on polynomials (Collatz; Patra & Karttunen, Numer. Meth. PDE 22, 2006; values follow from the stencils)", () => {
  const order: LaplacianStencil[] = ["cross", "square", "diagonal", "mehrstellen", "oono-puri"];
  type Polynomial = (x: number, y: number) => number;
  const rows: readonly [what: string, f: Polynomial, x: number, y: number, values: readonly number[]][] = [
    ["1", () => 1, 0, 0, [0, 0, 0, 0, 0]],
    ["x", (x) => x, 2, 1, [0, 0, 0, 0, 0]],
    ["xy", (x, y) => x * y, 3, 5, [0, 0, 0, 0, 0]],
    ["x³", (x) => x ** 3, 0, 0, [0, 0, 0, 0, 0]],
    ["x²", (x) => x * x, 0, 0, [2, 2, 2, 2, 2]],
    ["x² + y²", (x, y) => x * x + y * y, 0, 0, [4, 4, 4, 4, 4]],
    ["x⁴ at 0", (x) => x ** 4, 0, 0, [2, 2, 2, 2, 2]],
    ["x²y² at 0", (x, y) => x * x * y * y, 0, 0, [0, 4 / 3, 2, 2 / 3, 1]],
    ["(x² + y²)² at 0", (x, y) => (x * x + y * y) ** 2, 0, 0, [4, 20 / 3, 8, 16 / 3, 6]],
    ["x⁴ − 6x²y² + y⁴", (x, y) => x ** 4 - 6 * x * x * y * y + y ** 4, 2, 3, [4, -4, -8, 0, -2]],
    ["x⁴ at (1, 1)", (x) => x ** 4, 1, 1, [14, 14, 14, 14, 14]],
    ["x²y² at (1, 1)", (x, y) => x * x * y * y, 1, 1, [4, 16 / 3, 6, 14 / 3, 5]],
  ];

  test.each(rows)("%s", (_, f, x, y, values) => {
    order.forEach((stencil, k) => {
      const made = laplacian({ stencil });
      // Weights of thirds and sixths are cut by at most 20 · 2⁻⁵⁰; quarters and halves are exact.
      const exact = stencil !== "square" && stencil !== "mehrstellen";
      const allowed = exact ? 0 : slack(made, 1000) + 20 * 2 ** -50 * 1000;
      expect(Math.abs(resultAt(made, f, x, y) - values[k]!), stencil).toBeLessThanOrEqual(allowed);
    });
  });

  test("the mehrstellen error is the same in all directions: (1/12)∇⁴ on waves, the cross's is not", () => {
    const wave =
      (angle: number): Polynomial =>
      (x, y) =>
        Math.cos(0.5 * (x * Math.cos(angle) + y * Math.sin(angle)));
    const spread = (stencil: LaplacianStencil): number => Math.abs(resultAt(laplacian(stencil), wave(0)) - resultAt(laplacian(stencil), wave(Math.PI / 4)));
    // k⁴/24 for the cross to leading order; of sixth order, k⁶, for mehrstellen.
    expect(spread("cross")).toBeGreaterThan(0.5 ** 4 / 24 / 2);
    expect(spread("mehrstellen")).toBeLessThan(0.5 ** 6 / 100);
  });
});

describe("the Laplacian of a Gaussian (Marr & Hildreth, Proc. R. Soc. B 207, 1980; from memory)", () => {
  test("has the formula's values for sigma 1.4, to six decimals", () => {
    const made = laplacianOfGaussian({ sigma: 1.4, radius: 14 });
    const printed = [-0.082859, -0.047824, 0.00061, 0.01081, 0.00431];
    printed.forEach((value, k) => expectPrinted(flank(made)[k]!, value, 6, `column ${k}`));
    expectPrinted(flank(made)[0]!, -0.0828586751, 10, "centre −1/πσ⁴");
  });

  test("changes sign at r = √2 · sigma", () => {
    const sigma = 10;
    const middleRow = flank(laplacianOfGaussian(sigma));
    const crossing = middleRow.findIndex((tap) => tap > 0);
    expect(crossing).toBe(Math.ceil(Math.SQRT2 * sigma));
  });

  test("gives 4 on x² + y², as the Laplacian of it does whatever is blurred", () => {
    const made = laplacianOfGaussian({ sigma: 2, radius: 20 });
    expect(Math.abs(resultAt(made, (x, y) => x * x + y * y) - 4)).toBeLessThan(1e-9);
  });

  test("is much like minus the difference of Gaussians of ratio 1.6, whose zero crossing lies at σ · √(4r² ln r / (r² − 1))", () => {
    const sigma = 10;
    const ratio = 1.6;
    const tapsRight = flank(differenceOfGaussians({ sigma, ratio }));
    const crossing = sigma * Math.sqrt((4 * ratio ** 2 * Math.log(ratio)) / (ratio ** 2 - 1));
    expect(tapsRight.findIndex((tap) => tap < 0)).toBe(Math.ceil(crossing));
  });
});

/** J₁ by its power series, Abramowitz & Stegun 9.1.10. */
function besselJ1(x: number): number {
  let term = x / 2;
  let sum = 0;
  for (let k = 0; Math.abs(term) > 1e-18; k++) {
    sum += term;
    term *= -(x * x) / 4 / ((k + 1) * (k + 2));
  }
  return sum;
}

describe("optics", () => {
  test("a disk out of focus has the transfer function 2J₁(2πRf) / 2πRf times the aperture of a sample (Born & Wolf, Principles of Optics, from memory)", () => {
    const radius = 8;
    const made = disk({ radius });
    for (const frequency of [0.02, 0.05, 0.1, 0.15]) {
      const argument = 2 * Math.PI * radius * frequency;
      const theory = ((2 * besselJ1(argument)) / argument) * (Math.sin(Math.PI * frequency) / (Math.PI * frequency));
      expect(Math.abs(gain(made, frequency) - theory), `f = ${frequency}`).toBeLessThan(1e-3);
    }
  });

  test("a column of the disk is the area between two parallel chords, x√(R² − x²) + R² asin(x / R) (Archimedes)", () => {
    const radius = 8;
    const { taps, width, origin } = disk({ radius });
    const areaUpTo = (x: number): number => x * Math.sqrt(radius ** 2 - x ** 2) + radius ** 2 * Math.asin(x / radius);
    const clipped = (x: number): number => Math.min(radius, Math.max(-radius, x));
    for (let i = 0; i < width; i++) {
      const x = i - origin.x;
      const area = (areaUpTo(clipped(x + 0.5)) - areaUpTo(clipped(x - 0.5))) / (Math.PI * radius ** 2);
      const column = taps.filter((_, k) => k % width === i).reduce((sum, tap) => sum + tap, 0);
      expect(Math.abs(column - area), `x = ${x}`).toBeLessThan(1e-14);
    }
  });

  test("its first dark frequency is 0.609835 / R (first zero of J₁, Abramowitz & Stegun Table 9.5)", () => {
    const made = disk({ radius: 8 });
    expect(gain(made, (0.609835 / 8) * 0.99)).toBeGreaterThan(0);
    expect(gain(made, (0.609835 / 8) * 1.01)).toBeLessThan(0);
  });

  test("a box of L samples passes waves by sin(πfL) / (L sin πf): 0 at f = 1/3 and −1/3 at f = 1/2 for L = 3 (Dirichlet kernel)", () => {
    const made = box({ width: 3, height: 1 });
    expect(Math.abs(gain(made, 1 / 3))).toBeLessThan(slack(made, 4));
    expect(Math.abs(gain(made, 1 / 2) + 1 / 3)).toBeLessThan(slack(made, 4));
  });
});
