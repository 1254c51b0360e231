import { quantileSorted } from "simple-statistics";

/** Repeated measurements in short: quartiles, the fastest, and how many there were. Milliseconds. */
export interface Spread {
  median: number;
  p25: number;
  p75: number;
  fastest: number;
  samples: number;
}

const rounded = (milliseconds: number): number => Number(milliseconds.toPrecision(5));

export function spreadOf(milliseconds: readonly number[]): Spread {
  const sorted = milliseconds.toSorted((a, b) => a - b);
  const quantile = (part: number): number => rounded(quantileSorted(sorted, part));
  return { median: quantile(0.5), p25: quantile(0.25), p75: quantile(0.75), fastest: rounded(sorted[0]!), samples: sorted.length };
}
