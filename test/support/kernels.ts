import { box, kernel, outer, type Kernel } from "../../src/kernels/index.js";
import { noise } from "./noise.js";

/** Taps −1 … 1 from a seed; not separable. */
export function noiseKernel(width: number, height: number, seed: number, origin?: { x: number; y: number }): Kernel {
  const next = noise(seed);
  for (let warm = 0; warm < 8; warm++) next();
  const rows = Array.from({ length: height }, () => Array.from({ length: width }, () => 2 * next() - 1));
  return origin === undefined ? kernel(rows) : kernel(rows, { origin });
}

/** One kernel for each kind of method: any taps, an outer product, a box; odd, even, thin and larger than small images. */
export const kernelsOfEveryKind: readonly [name: string, kernel: Kernel][] = [
  ["3 × 3", noiseKernel(3, 3, 1)],
  ["4 × 5 with another origin", noiseKernel(4, 5, 2, { x: 3, y: 0 })],
  ["1 × 7", noiseKernel(1, 7, 3)],
  ["9 × 9", noiseKernel(9, 9, 4)],
  ["29 × 31", noiseKernel(29, 31, 5)],
  ["outer product 5 × 7", outer([1, -2, 3, 0.5, 0.25, 1, 2], [0.5, 1, 0.5, -0.25, 2])],
  ["box 5 × 5", box(5)],
  ["box 1 × 12", box({ width: 1, height: 12 })],
];
