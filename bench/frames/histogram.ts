import { quantileSorted } from "simple-statistics";

/** How often times fell between neighbouring edges, all in parts of the median. */
export interface Histogram {
  edges: number[];
  counts: number[];
}

export interface TimeSummary {
  medianMilliseconds: number;
  p99Milliseconds: number;
  worstMilliseconds: number;
  p99ToMedian: number;
  histogram: Histogram;
}

/** From four fifths of the median to one and a half times it, and what lies beyond at either end. */
const edges = [0, 0.8, 0.85, 0.9, 0.95, 1, 1.05, 1.1, 1.15, 1.2, 1.25, 1.3, 1.4, 1.5, 2, Infinity];

const digits = (value: number): number => Number(value.toPrecision(5));

export function summarise(milliseconds: readonly number[]): TimeSummary {
  const sorted = milliseconds.toSorted((a, b) => a - b);
  const median = quantileSorted(sorted, 0.5);
  const p99 = quantileSorted(sorted, 0.99);
  const counts = edges.slice(1).map((end, index) => sorted.filter((one) => one / median >= edges[index]! && one / median < end).length);
  return {
    medianMilliseconds: digits(median),
    p99Milliseconds: digits(p99),
    worstMilliseconds: digits(sorted.at(-1)!),
    p99ToMedian: digits(p99 / median),
    histogram: { edges: edges.map((edge) => (edge === Infinity ? 1000 : edge)), counts },
  };
}

const barWidth = 40;

/** Two histograms side by side; a bar's length goes with the logarithm of its count, so that a single late frame shows. */
export function printHistograms(left: [string, Histogram], right: [string, Histogram]): void {
  const most = Math.log2(1 + Math.max(...left[1].counts, ...right[1].counts));
  const bar = (count: number): string => `${String(count).padStart(5)} ${"▇".repeat(Math.ceil((barWidth * Math.log2(1 + count)) / most))}`.padEnd(barWidth + 7);
  console.log(`time ÷ median   ${left[0].padEnd(barWidth + 7)} ${right[0]}`);
  for (const [index, count] of left[1].counts.entries()) {
    const from = edges[index]!.toFixed(2);
    const to = edges[index + 1] === Infinity ? "…   " : edges[index + 1]!.toFixed(2);
    console.log(`${from} … ${to}     ${bar(count)} ${bar(right[1].counts[index]!).trimEnd()}`);
  }
}
