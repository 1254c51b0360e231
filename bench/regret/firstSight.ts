import { box, gaussian, kernel, type Kernel, type Layout, type PrepareOptions } from "../../src/index.js";
import { noise } from "../../test/support/noise.js";
import { median } from "simple-statistics";

/** The side of the kernels that are seen for the first time. */
export const side = 255;

const made = (element: (row: number, column: number) => number): (() => Kernel) => {
  const rows = Array.from({ length: side }, (_, j) => Float64Array.from({ length: side }, (_unused, i) => element(j, i)));
  return () => kernel(rows);
};

const draw = noise(255);
const positive = (): number => (0.05 + draw()) / (side * side);

function ofRank(rank: number): (row: number, column: number) => number {
  const terms = Array.from({ length: rank }, () => [0, 1].map(() => Float64Array.from({ length: side }, () => (0.05 + draw()) / (side * Math.sqrt(rank)))));
  return (j, i) => terms.reduce((sum, [column, row]) => sum + column![j]! * row![i]!, 0);
}

const disk = (j: number, i: number): number => ((i - 127) * (i - 127) + (j - 127) * (j - 127) <= 127 * 127 ? 1 / 50_645 : 0);
const distance = (j: number, i: number): number => Math.sqrt((i - 127) * (i - 127) + (j - 127) * (j - 127));

/** Kernels of every kind that planning looks at in its own way, made anew at each call. */
export const kinds = (): Record<string, () => Kernel> => ({
  "without structure": made(positive),
  "positive and negative": made(() => positive() - 0.4 / (side * side)),
  "whole numbers": made(() => Math.floor(16 * draw()) - 3),
  "bell": () => gaussian({ sigma: 42, radius: 127 }),
  "bell with tails next to nothing": () => gaussian({ sigma: 8, radius: 127 }),
  "box": () => box(side),
  "disk": made(disk),
  "ring, falling off slowly": made((j, i) => 1 / ((1 + Math.abs(distance(j, i) - 80)) * side * side)),
  "rank 2": made(ofRank(2)),
  "rank 4": made(ofRank(4)),
  "rank 16": made(ofRank(16)),
  "rank 4 and a little noise": made((j, i) => ofRank4(j, i) * (1 + 1e-4 * (draw() - 0.5))),
  "one tap in a hundred": made(() => (draw() < 0.01 ? 1 / 650 : 0)),
  "one tap in three": made(() => (draw() < 0.33 ? 1 / 21_000 : 0)),
  "diagonal line": made((j, i) => (i === j || i === j + 1 ? 1 / 509 : 0)),
  "a single tap": made((j, i) => (i === 127 && j === 127 ? 1 : 0)),
});

const ofRank4 = ofRank(4);

/** Layouts and options that lead to different looks at a kernel. */
export const settings: readonly { name: string; layout: Required<Layout>; options: PrepareOptions }[] = [
  { name: "1080p RGBA bytes, straight alpha", layout: { width: 1919, height: 1080, channels: 4, sample: "u8" }, options: {} },
  { name: "1080p RGBA bytes, no alpha", layout: { width: 1919, height: 1080, channels: 4, sample: "u8" }, options: { alpha: "none" } },
  { name: "1080p bytes, tolerance 2", layout: { width: 1919, height: 1080, channels: 1, sample: "u8" }, options: { tolerance: 2 } },
  { name: "1080p floats", layout: { width: 1919, height: 1080, channels: 1, sample: "f32" }, options: {} },
  { name: "4000×4000 RGBA words, linear light", layout: { width: 3999, height: 4000, channels: 4, sample: "u16" }, options: { light: "linear" } },
  { name: "128×128 floats, periodic", layout: { width: 127, height: 128, channels: 1, sample: "f32" }, options: { border: "periodic" } },
  { name: "512×512 bytes, renormalised", layout: { width: 511, height: 512, channels: 1, sample: "u8" }, options: { border: "renormalised" } },
  { name: "1080p RGBA floats, renormalised", layout: { width: 1919, height: 1080, channels: 4, sample: "f32" }, options: { border: "renormalised" } },
  {
    name: "1080p bytes, a region of 64×64, renormalised",
    layout: { width: 1919, height: 1080, channels: 1, sample: "u8" },
    options: { border: "renormalised", region: { x: 900, y: 500, width: 64, height: 64 } },
  },
];

/** How long `explain` takes on kernels that it has not seen, of one kind in one setting. */
export interface FirstSight {
  kernel: string;
  setting: string;
  medianMilliseconds: number;
  worstMilliseconds: number;
}

const repetitions = 7;

/** True where the border takes such taps. */
const applies = (one: Kernel, options: PrepareOptions): boolean => options.border !== "renormalised" || !one.taps.some((tap) => tap < 0);

/** One kind in all settings, fresh kernels each time; the first sight of all is for warming up. */
export function firstSights(explain: (one: Kernel, layout: Layout, options: PrepareOptions) => unknown, name: string): FirstSight[] {
  const make = kinds()[name]!;
  const time = ({ layout, options }: (typeof settings)[number]): number => {
    const fresh = make();
    const begun = performance.now();
    explain(fresh, layout, options);
    return performance.now() - begun;
  };
  const open = settings.filter(({ options }) => applies(make(), options));
  for (const setting of open) time(setting);
  return open.map((setting) => {
    const times = Array.from({ length: repetitions }, () => time(setting));
    return { kernel: name, setting: setting.name, medianMilliseconds: round(median(times)), worstMilliseconds: round(Math.max(...times)) };
  });
}

const round = (milliseconds: number): number => Number(milliseconds.toPrecision(3));
