import { noise } from "../support/noise.js";

/** Numbers by chance, the same for a seed everywhere. */
export interface Chance {
  /** Uniform, 0 … 1. */
  uniform(): number;
  /** Normal with mean 0 and standard deviation 1 (Box & Muller, Ann. Math. Stat. 29: 610, 1958). */
  normal(): number;
  /** Uniform in its logarithm. */
  between(low: number, high: number): number;
}

export function chance(seed: number): Chance {
  const next = noise(Math.imul(seed, 2_654_435_761));
  for (let warm = 0; warm < 16; warm++) next();
  return {
    uniform: next,
    normal: () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next()),
    between: (low, high) => low * Math.exp(next() * Math.log(high / low)),
  };
}

/** The value below which a part of all lies. */
export function quantile(values: readonly number[], part: number): number {
  return values.toSorted((a, b) => a - b)[Math.floor(part * (values.length - 1))]!;
}
