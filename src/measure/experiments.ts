import { box, gaussian, kernel, type Kernel } from "../kernels/index.js";
import type { Channels, Layout, Method, PrepareOptions, SampleType } from "../types.js";
import { structureless } from "./structureless.js";

/** A run that may be timed: one method on one problem. */
export interface Experiment {
  name: string;
  layout: Required<Layout>;
  kernel: Kernel;
  options: PrepareOptions & { method: Method };
}

/** Widths of all experiments are even, those of the problems that profiles are judged by are odd: no problem is in both. */
export const isExperimentWidth = (width: number): boolean => width % 2 === 0;

type Shape = readonly [width: number, height: number];

const tiny: Shape = [32, 24];
const small: Shape = [128, 96];
const medium: Shape = [384, 256];
const large: Shape = [1024, 640];
const tall: Shape = [16, 1200];
const flat: Shape = [2400, 16];

const bell = (width: number, height: number): Kernel =>
  gaussian({ sigma: { x: Math.max(0.5, width / 6), y: Math.max(0.5, height / 6) }, radius: { x: (width - 1) / 2, y: (height - 1) / 2 } });

/** Two taps a row, all others 0. */
const slanted = (taps: number): Kernel =>
  kernel(Array.from({ length: taps }, (_, j) => Array.from({ length: taps }, (_, i) => (i === j || i === j + 1 ? 1 / (2 * taps) : 0))));

const kinds = { any: structureless, bell, slanted, box: (width: number, height: number) => box({ width, height }) };

/** Kernels are made once: analysing one takes longer than many a run. */
function kernelsByShape(): (kind: keyof typeof kinds, width: number, height: number) => Kernel {
  const known = new Map<string, Kernel>();
  return (kind, width, height) => {
    const name = `${kind} ${width}×${height}`;
    let made = known.get(name);
    if (!made) known.set(name, (made = kinds[kind](width, height)));
    return made;
  };
}

type Line = readonly [
  method: Method,
  kind: keyof typeof kinds,
  sizes: readonly (number | Shape)[],
  shapes: readonly Shape[],
  forms: readonly (readonly [SampleType, Channels])[],
  options?: PrepareOptions,
];

const u8 = ["u8", 1] as const;
const rgba = ["u8", 4] as const;
const f32 = ["f32", 1] as const;
const planes = ["f32", 4] as const;
const u16 = ["u16", 1] as const;
const rgba16 = ["u16", 4] as const;
const plain: PrepareOptions = { alpha: "none" };
/** Bytes by way of floats. */
const floats: PrepareOptions = { tolerance: 0 };

/** What separates the prices: each way to compute in several sizes, each way in and out, the edges, large and small images. */
const lines: readonly Line[] = [
  ["direct", "any", [3], [tiny, small, medium, large], [f32, u8]],
  ["direct", "any", [5, 9, 15, [15, 1], [1, 15]], [small, medium], [f32]],
  ["direct", "any", [5, 9, 15], [small, medium], [u8]],
  ["direct", "any", [2], [small, medium, large], [u8]],
  ["running-sum", "box", [2], [small, large], [u8]],
  ["direct", "any", [3, 7], [small, medium], [rgba], plain],
  ["direct", "any", [3, 9], [medium], [planes], plain],
  ["direct", "any", [5], [medium], [u8], floats],
  ["direct", "slanted", [15, 31], [small, medium], [u8, f32]],
  ["separable", "bell", [5, 15, 41], [small, medium], [f32, u8]],
  ["separable", "bell", [9, 25], [medium, large], [rgba, planes], plain],
  ["separable", "bell", [9, 25], [medium], [u8, rgba], { ...floats, ...plain }],
  ["separable", "bell", [15, [31, 1], [1, 31]], [tall, flat], [f32]],
  ["separable", "bell", [15], [large], [u8, f32]],
  ["running-sum", "box", [5, 31], [small, medium], [u8, u16, f32]],
  ["running-sum", "box", [9], [medium, large], [rgba], plain],
  ["running-sum", "box", [9], [medium], [u8], { output: { sample: "f32" } }],
  ["running-sum", "box", [9], [large], [u16, f32]],
  ["running-sum", "box", [9], [small, medium], [rgba16, planes], plain],
  ["running-sum", "box", [63], [small], [u16, f32]],
  ["fft", "any", [9, 31], [small, medium, large], [f32]],
  ["fft", "any", [31], [small, medium], [u8, rgba], plain],
  ["fft", "any", [63], [medium], [f32, rgba], plain],
  ["direct", "any", [3], [medium, large], [u16]],
  ["direct", "any", [3], [medium], [u8], { output: { sample: "f32" } }],
  ["direct", "any", [3], [medium], [f32], { output: { sample: "u8" } }],
  ["direct", "any", [3], [medium], [f32], { output: { sample: "u16" } }],
  ["direct", "any", [3], [small, medium], [rgba, planes]],
  ["direct", "any", [3], [small, medium], [f32], { border: "renormalised" }],
  ["separable", "bell", [15], [medium], [rgba], { border: "renormalised", ...plain }],
  ["separable", "bell", [9], [medium], [rgba, planes]],
  ["direct", "any", [3], [small, medium], [u8, f32, u16], { light: "linear" }],
  ["fft", "any", [31], [medium], [rgba], { alpha: "keep" }],
  ["direct", "any", [3], [medium], [rgba], { alpha: "keep" }],
];

const nameOf = ({ width, height, channels, sample }: Required<Layout>): string => `${width}×${height}×${channels} ${sample}`;

/** Options that say nothing for a layout are refused there: alpha without an alpha channel. */
function fitting({ alpha, ...options }: PrepareOptions, channels: Channels): PrepareOptions {
  return channels === 4 && alpha !== undefined ? { ...options, alpha } : options;
}

/** All runs that may be timed. The ones to be timed are chosen among them: see design. */
export function* experiments(): Generator<Experiment> {
  const kernelOf = kernelsByShape();
  for (const [method, kind, sizes, shapes, forms, given = {}] of lines) {
    for (const size of sizes) {
      const [across, down] = typeof size === "number" ? [size, size] : size;
      for (const [width, height] of shapes) {
        for (const [sample, channels] of forms) {
          const layout = { width, height, channels, sample };
          const options = { ...fitting(given, channels), method };
          const name = `${nameOf(layout)}, ${method}, ${kind} ${across}×${down} ${JSON.stringify(given)}`;
          yield { name, layout, kernel: kernelOf(kind, across, down), options };
        }
      }
    }
  }
}
