import type { Kernel } from "../../src/kernels/index.js";

/** The definition of convolution at one place of an endless image: Σⱼ Σᵢ h[j, i] · I(x − (i − ox), y − (j − oy)), in double. */
export function resultAt(kernel: Kernel, image: (x: number, y: number) => number, x = 0, y = 0): number {
  const { width, height, origin, taps } = kernel;
  let sum = 0;
  for (let j = 0; j < height; j++) {
    for (let i = 0; i < width; i++) sum += taps[j * width + i]! * image(x - (i - origin.x), y - (j - origin.y));
  }
  return sum;
}

/** Taps as rows of numbers. */
export function rowsOf({ width, height, taps }: Kernel): number[][] {
  return Array.from({ length: height }, (_, j) => Array.from(taps.slice(j * width, (j + 1) * width)));
}

/** Σ |taps|, the unit of rounding errors. */
export function weightOf({ taps }: Kernel): number {
  return taps.reduce((total, tap) => total + Math.abs(tap), 0);
}
