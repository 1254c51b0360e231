import type { HardwareProfile, Method } from "../../src/index.js";
import type { Crossing, Crossover, CrossoverRow } from "../../src/measure/types.js";

/** Made up, and no machine's: milliseconds of one run on an image that nobody filtered. */
const surfaces: Record<Method, (size: number) => number> = {
  "direct": (size) => 0.6 + 0.055 * size * size,
  "separable": (size) => 1.4 + 0.21 * size,
  "running-sum": () => 2.1,
  "fft": (size) => 11 + 0.02 * size + (size > 63 ? 1.5 : 0),
};

const usualSizes = [3, 5, 7, 9, 11, 13, 15, 21, 31, 45, 63, 91, 127];

interface SampleOptions {
  methods?: readonly Method[];
  sizes?: readonly number[];
  /** Sizes from which a method is too slow to be timed, and only predicted. */
  untimedFrom?: Partial<Record<Method, number>>;
  /** Factor on every time. */
  slower?: number;
}

/** A crossover of the made-up times above, with crossings where their curves meet. */
export function sampleCrossover({ methods = ["direct", "separable", "fft"], sizes = usualSizes, untimedFrom = {}, slower = 1 }: SampleOptions = {}): Crossover {
  const rows = sizes.map((size) => sampleRow(size, methods, untimedFrom, slower));
  return {
    layout: { width: 1920, height: 1080, channels: 1, sample: "u8" },
    border: "replicate",
    separable: methods.includes("separable"),
    rows,
    crossings: crossingsOf(methods, sizes),
    notes: [],
    host: "made-up processor, no runtime",
    build: "simd",
    threads: 1,
    profile: "made-up profile",
    date: "2026-12-01T14:05:00.000Z",
  };
}

function sampleRow(size: number, methods: readonly Method[], untimedFrom: Partial<Record<Method, number>>, slower: number): CrossoverRow {
  const timed = methods.filter((method) => size < (untimedFrom[method] ?? Infinity));
  // Errors that look irregular and are the same each time.
  const error = (method: Method, seed: number): number => 1 + 0.06 * Math.sin(size * seed + 3 * method.length);
  const time = (method: Method): number => slower * surfaces[method](size) * error(method, 1.7);
  const predicted = (method: Method): number => slower * surfaces[method](size) * error(method, 0.4) * 1.05;
  const fastestBy = (cost: (method: Method) => number, among: readonly Method[]): Method => among.reduce((a, b) => (cost(b) < cost(a) ? b : a));
  const [fastest, chosen] = [fastestBy(time, timed), fastestBy(predicted, methods)];
  const excess = timed.includes(chosen) ? time(chosen) / time(fastest) - 1 : 0;
  return {
    size,
    milliseconds: Object.fromEntries(timed.map((method) => [method, time(method)])),
    quartiles: Object.fromEntries(timed.map((method) => [method, [time(method) * 0.94, time(method) * 1.09]])),
    samples: 9 * timed.length,
    predicted: Object.fromEntries(methods.map((method) => [method, predicted(method)])),
    chosen,
    fastest,
    regret: excess < 0.02 ? 0 : excess,
  };
}

function crossingsOf(methods: readonly Method[], sizes: readonly number[]): Crossing[] {
  const found: Crossing[] = [];
  for (const from of methods)
    for (const to of methods)
      for (let k = 1; k < sizes.length; k++) {
        const [low, high] = [sizes[k - 1]!, sizes[k]!];
        const gain = (size: number): number => surfaces[from](size) - surfaces[to](size);
        if (!(gain(low) < 0 && gain(high) >= 0)) continue;
        const size = bisected(gain, low, high);
        const least = Math.min(...methods.map((method) => surfaces[method](size)));
        found.push({ from, to, size, interval: [sizes[Math.max(0, k - 2)]!, high], leading: surfaces[to](size) < 1.001 * least });
      }
  return found.toSorted((a, b) => a.size - b.size);
}

/** Where a rising function is 0 between two places. */
function bisected(rising: (size: number) => number, low: number, high: number): number {
  let [below, above] = [low, high];
  for (let k = 0; k < 60; k++) {
    const middle = (below + above) / 2;
    if (rising(middle) < 0) below = middle;
    else above = middle;
  }
  return above;
}

/** A made-up profile with everything that a profile may hold. */
export function sampleProfile(): HardwareProfile {
  const names = ["run", "step", "row", "enter_u8", "leave_u8", "directTap", "rowTap", "columnTap", "columnPass", "rowPass", "setup", "setupTap"];
  return {
    version: 2,
    host: "made-up processor, no runtime",
    build: "simd",
    threads: 1,
    date: "2026-12-01T13:55:00.000Z",
    nanoseconds: Object.fromEntries(names.map((name, k) => [name, 1200 / (1 + k * k * k)])),
    spread: Object.fromEntries(names.slice(0, 10).map((name, k) => [name, 0.004 + 0.007 * k])),
    checks: [
      { problem: "800×600, 1 channel of u8, 11×11 taps", method: "direct", predicted: 2.31, measured: 2.2 },
      { problem: "800×600, 4 channels of f32, 31×31 taps", method: "fft", predicted: 18.1, measured: 19.4 },
    ],
    verdicts: [{ shape: "u8×1 800×600 13×13 full rank", method: "fft", milliseconds: { direct: 4.1, fft: 3.9 }, date: "2026-12-01T14:00:00.000Z" }],
    notes: ["Two prices could not be told apart and were taken over in proportion to others."],
  };
}
