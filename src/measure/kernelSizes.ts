import { ConvolutionError } from "../errors.js";
import { gaussian, type Kernel } from "../kernels/index.js";
import { structureless } from "./structureless.js";

/** Every size up to here, then as many in each doubling as in the one before. */
const everySize = 15;
const perDoubling = 6;
const largest = 127;
const mostTaps = 1023;

/** 3, 5, 7 … 15, then further and further apart up to 127. */
function defaultSizes(): number[] {
  const sizes = new Set<number>();
  for (let size = 3; size <= everySize; size += 2) sizes.add(size);
  for (let step = 1; ; step++) {
    const size = 2 * Math.round((everySize * 2 ** (step / perDoubling) - 1) / 2) + 1;
    if (size >= largest) return [...sizes, largest];
    sizes.add(size);
  }
}

/**
 * Kernel sizes in rising order, each once.
 *
 * @throws ConvolutionError `invalid-number`
 */
export function checkedSizes(given: unknown): number[] {
  if (given === undefined) return defaultSizes();
  const expected = `odd whole numbers 1…${mostTaps}`;
  const isSize = (value: unknown): value is number =>
    Number.isInteger(value) && (value as number) >= 1 && (value as number) <= mostTaps && (value as number) % 2 === 1;
  const wrong = !Array.isArray(given) || given.length === 0 ? given : given.find((size: unknown) => !isSize(size));
  if (wrong === undefined) return [...new Set(given as number[])].toSorted((a, b) => a - b);
  const found = Array.isArray(wrong) ? "an empty list" : Array.isArray(given) ? String(wrong) : typeof given;
  throw new ConvolutionError(
    "invalid-number",
    `measureCrossover: sizes ${Array.isArray(given) && given.length > 0 ? "has" : "is"} ${found}. Needed: a list of ${expected}, taps a side.`,
    {
      expected,
      received: wrong,
    },
  );
}

/** A bell that is separable and ends near 0, or taps without structure: the two that methods differ for. */
export function kernelOfSize(size: number, separable: boolean): Kernel {
  return separable ? gaussian({ sigma: Math.max(0.5, size / 6), radius: (size - 1) / 2 }) : structureless(size, size);
}
