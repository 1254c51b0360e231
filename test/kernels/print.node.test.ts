import { inspect } from "node:util";
import { expect, test } from "vitest";
import { gaussian, kernel, sobel } from "../../src/kernels/index.js";

test("a small kernel prints its taps in columns", () => {
  expect(inspect(sobel("x"))).toBe("kernel 3×3, origin (1, 1), sum 0\n   1   0  -1\n   2   0  -2\n   1   0  -1");
  expect(inspect(kernel([0.1 + 0.2, 1 / 3]))).toBe(`kernel 2×1, origin (0, 0), sum ${0.1 + 0.2 + 1 / 3}\n       0.3  0.333333`);
});

test("a large kernel prints in one line", () => {
  expect(inspect(gaussian(3))).toBe("kernel 25×25, origin (12, 12), sum 1");
});
