import type { Kernel } from "../../src/index.js";

/** The row and the column of an outer product whose factors add up to 1. */
export function factorsOf({ taps, width, height }: Kernel): { row: number[]; column: number[] } {
  const row = Array.from({ length: width }, (_, i) => sumOf(height, (j) => taps[j * width + i]!));
  const column = Array.from({ length: height }, (_, j) => sumOf(width, (i) => taps[j * width + i]!));
  return { row, column };
}

function sumOf(count: number, term: (index: number) => number): number {
  let sum = 0;
  for (let index = 0; index < count; index += 1) sum += term(index);
  return sum;
}
