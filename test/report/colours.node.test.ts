import { describe, expect, test } from "vitest";
import type { Method } from "../../src/index.js";
import { chartStyle, signs, strokeOf } from "../../src/report/chart/colours.js";

type Triple = [number, number, number];

/** sRGB to linear light. Source: IEC 61966-2-1. */
function linear(hex: string): Triple {
  const channel = (at: number): number => {
    const value = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
  };
  return [channel(1), channel(3), channel(5)];
}

/** Contrast ratio. Source: Web Content Accessibility Guidelines 2.2, "relative luminance" and "contrast ratio". */
function contrast(one: string, other: string): number {
  const luminance = (hex: string): number => {
    const [red, green, blue] = linear(hex);
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
  };
  const [darker, lighter] = [luminance(one), luminance(other)].toSorted((a, b) => a - b) as [number, number];
  return (lighter + 0.05) / (darker + 0.05);
}

/**
 * What dichromats see, in linear light.
 * Source: Machado, Oliveira & Fernandes, A Physiologically-based Model for Simulation of Color Vision Deficiency, IEEE TVCG 15(6), 2009:
 * severity 1.0.
 */
const visions: Record<string, readonly [Triple, Triple, Triple]> = {
  "all colours": [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ],
  "no red cones": [
    [0.152286, 1.052583, -0.204868],
    [0.114503, 0.786281, 0.099216],
    [-0.003882, -0.048116, 1.051998],
  ],
  "no green cones": [
    [0.367322, 0.860646, -0.227968],
    [0.280085, 0.672501, 0.047413],
    [-0.01182, 0.04294, 0.968881],
  ],
  "no blue cones": [
    [1.255528, -0.076749, -0.178779],
    [-0.078411, 0.930809, 0.147602],
    [0.004733, 0.691367, 0.3039],
  ],
};

const times = (matrix: readonly Triple[], [a, b, c]: Triple): Triple => matrix.map((row) => row[0] * a + row[1] * b + row[2] * c) as Triple;

/** CIE 1976 L*a*b* under D65. Source: CIE 15:2004; the matrix from sRGB to XYZ: IEC 61966-2-1. */
function lab(light: Triple): Triple {
  const within = light.map((value) => Math.min(1, Math.max(0, value))) as Triple;
  const xyz = times(
    [
      [0.4124, 0.3576, 0.1805],
      [0.2126, 0.7152, 0.0722],
      [0.0193, 0.1192, 0.9505],
    ],
    within,
  );
  const [x, y, z] = xyz.map((value, k) => {
    const ratio = value / [0.9505, 1, 1.089][k]!;
    return ratio > (6 / 29) ** 3 ? Math.cbrt(ratio) : ratio / (3 * (6 / 29) ** 2) + 4 / 29;
  }) as Triple;
  return [116 * y - 16, 500 * (x - y), 200 * (y - z)];
}

const methods = Object.keys(signs) as Method[];
const surroundings = [
  ["light", "#ffffff"],
  ["light", "#f3f1ea"],
  ["dark", "#15181c"],
  ["dark", "#20242a"],
] as const;

describe("colours of methods", () => {
  test.each(surroundings)("%s ones can be read as text on %s", (kind, paper) => {
    for (const method of methods) expect(contrast(signs[method][kind], paper)).toBeGreaterThanOrEqual(4.5);
  });

  test.each(Object.keys(visions).flatMap((vision) => (["light", "dark"] as const).map((kind) => [vision, kind] as const)))(
    "to eyes with %s the %s ones are far apart",
    (vision, kind) => {
      for (const [k, one] of methods.entries())
        for (const other of methods.slice(k + 1)) {
          const [a, b] = [one, other].map((method) => lab(times(visions[vision]!, linear(signs[method][kind])))) as [Triple, Triple];
          // About 2.3 is just noticeable (Mahy, Van Eycken & Oosterlinck, Color Research & Application 19(2), 1994).
          expect(Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]), `${one} and ${other}`).toBeGreaterThan(15);
        }
    },
  );

  test("methods have shapes of their own", () => {
    expect(new Set(methods.map((method) => signs[method].symbol)).size).toBe(methods.length);
  });

  test("a page sets them by the names that the drawing asks for", () => {
    for (const method of methods) {
      expect(strokeOf(method)).toBe(`var(--tapwise-${method}, ${signs[method].light})`);
      expect(chartStyle).toContain(`--tapwise-${method}: ${signs[method].light};`);
      expect(chartStyle).toContain(`--tapwise-${method}: ${signs[method].dark};`);
    }
  });

  test("the yardstick tells black from white and a colour from itself", () => {
    expect(contrast("#000000", "#ffffff")).toBeCloseTo(21, 10);
    expect(contrast("#777777", "#ffffff")).toBeCloseTo(4.48, 2);
    const [lightness, green, blue] = lab(linear("#ffffff"));
    expect(lightness).toBeCloseTo(100, 1);
    expect(Math.hypot(green, blue)).toBeLessThan(0.1);
  });
});
