import fc from "fast-check";
import { kernel, type Kernel } from "../../src/kernels/index.js";
import type { Alpha, Border, BorderRule, Channels, ConvolveOptions, Extent, Output, Raster, SampleType, Samples } from "../../src/types.js";
import { noise, noiseSamples } from "../support/noise.js";
import type { Question } from "../support/questions.js";
import { fullValue } from "./samples.js";

/** Widths and heights around the vector width, tiny ones, and some of no particular kind. */
const side = fc.oneof(fc.constantFrom(1, 2, 3, 4, 5, 7, 8, 9, 15, 16, 17), fc.integer({ min: 1, max: 36 }));
const kernelSide = fc.oneof({ weight: 4, arbitrary: fc.integer({ min: 1, max: 7 }) }, { weight: 1, arbitrary: fc.integer({ min: 8, max: 40 }) });
const fraction = fc.integer({ min: 0, max: 16 }).map((sixteenths) => sixteenths / 16);

const kernelKinds = ["signed", "positive", "integer", "separable", "two-terms", "constant", "zero", "impulse", "denormal", "tails", "sparse"] as const;
type KernelKind = (typeof kernelKinds)[number];
const imageKinds = ["noise", "noise", "extremes", "sparse", "opaque", "beyond", "not-finite", "denormal"] as const;
type ImageKind = (typeof imageKinds)[number];
const rules = ["replicate", "zero", "periodic", "half-sample-symmetric", "whole-sample-symmetric", "renormalised", "constant", "constants"] as const;
type RuleName = (typeof rules)[number];

/** A problem in plain numbers, so that fast-check can print and shrink it. */
const recipe = fc.record({
  width: side,
  height: side,
  channels: fc.constantFrom<Channels>(1, 2, 3, 4),
  sample: fc.constantFrom("u8", "u8-clamped", "u16", "f32"),
  imageKind: fc.constantFrom<ImageKind>(...imageKinds),
  seed: fc.integer({ min: 1, max: 1_000_000 }),
  rowGap: fc.constantFrom(0, 0, 1, 5),
  viewStart: fc.constantFrom(0, 0, 1, 3),
  kernelKind: fc.constantFrom<KernelKind>(...kernelKinds),
  m: kernelSide,
  n: kernelSide,
  origin: fc.option(fc.record({ x: fraction, y: fraction })),
  correlate: fc.boolean(),
  rows: fc.constantFrom<RuleName>(...rules),
  columns: fc.option(fc.constantFrom<RuleName>(...rules)),
  extent: fc.constantFrom<Extent>("same", "same", "full", "valid"),
  region: fc.option(fc.record({ x: fraction, y: fraction, width: fraction, height: fraction }), { freq: 3 }),
  alpha: fc.constantFrom<Alpha | undefined>(undefined, "straight", "premultiplied", "keep", "none"),
  light: fc.constantFrom<"encoded" | "linear" | undefined>(undefined, "encoded", "linear"),
  output: fc.constantFrom<SampleType | undefined>(undefined, undefined, "u8", "u16", "f32"),
  gain: fc.constantFrom<number | undefined>(undefined, undefined, 1 / 257, 257, 0.5, -1, 0),
  offset: fc.constantFrom<number | undefined>(undefined, undefined, 128, 0.25, -3),
  tolerance: fc.constantFrom<number | undefined>(undefined, undefined, 0, 0.5),
});
type Recipe = typeof recipe extends fc.Arbitrary<infer T> ? T : never;

/** Random problems, every one legal. */
export const problems: fc.Arbitrary<Recipe> = recipe.map(affordable);

export { fc };

/** The definition's loops are slow on purpose: the kernel is shortened until they take a few milliseconds. */
function affordable(wanted: Recipe): Recipe {
  const made = { ...wanted };
  const grown = (count: number, taps: number): number => (made.extent === "full" ? count + taps : count);
  const work = (): number => grown(made.width, made.m) * grown(made.height, made.n) * made.m * made.n;
  while (work() > 300_000) {
    if (made.m > made.n) made.m = Math.ceil(made.m / 2);
    else made.n = Math.ceil(made.n / 2);
  }
  return made;
}

/** From plain numbers to an image, a kernel and options. */
export function posed(made: Recipe): Question {
  const renormalised = made.extent !== "valid" && (made.rows === "renormalised" || made.columns === "renormalised");
  const taps = tapsOf(made).map((tap) => (renormalised ? Math.abs(tap) : tap));
  const kernelValue = kernelOf(made, taps);
  const fits = made.extent !== "valid" || (made.m <= made.width && made.n <= made.height);
  const extent = fits ? made.extent : "same";
  const options: ConvolveOptions = { extent };
  if (made.extent !== "valid") options.border = borderOf(made, kernelValue.sum === 0);
  const alpha = alphaOf(made, taps);
  if (alpha !== undefined) options.alpha = alpha;
  if (made.light !== undefined) options.light = made.light;
  const output = outputOf(made);
  if (Object.keys(output).length > 0) options.output = output;
  if (made.tolerance !== undefined) options.tolerance = made.tolerance;
  const region = regionOf(made, extent);
  if (region !== undefined) options.region = region;
  return { image: imageOf(made), kernel: kernelValue, options, correlate: made.correlate };
}

function tapsOf({ kernelKind, m, n, seed }: Recipe): number[] {
  const next = noise(seed + 77);
  for (let warm = 0; warm < 5; warm++) next();
  const list = (count: number, make: () => number): number[] => Array.from({ length: count }, make);
  const signed = (): number => 2 * next() - 1;
  const product = (column: number[], row: number[]): number[] => column.flatMap((a) => row.map((b) => a * b));
  switch (kernelKind) {
    case "signed":
      return list(m * n, signed);
    case "positive":
      return list(m * n, () => (next() + 0.01) / (m * n));
    case "integer":
      return list(m * n, () => Math.floor(9 * next()) - 3);
    case "separable":
      return product(list(n, signed), list(m, signed));
    case "two-terms": {
      const second = product(list(n, signed), list(m, signed));
      return product(list(n, signed), list(m, signed)).map((tap, index) => tap + second[index]!);
    }
    case "constant": {
      const tap = seed % 3 === 0 ? 1 : 1 / (m * n);
      return list(m * n, () => tap);
    }
    case "zero":
      return list(m * n, () => 0);
    case "impulse":
      return list(m * n, () => 0).with(seed % (m * n), seed % 2 === 0 ? 1 : -0.75);
    case "denormal":
      return list(m * n, () => signed() * (next() < 0.5 ? 1e-40 : next() < 0.5 ? 1e-310 : 0.2));
    case "tails":
      return list(m * n, () => 10 ** (-30 * next()));
    case "sparse":
      return list(m * n, () => (next() < 0.85 ? 0 : signed()));
  }
}

function kernelOf({ m, n, origin }: Recipe, taps: number[]): Kernel {
  const rows = Array.from({ length: n }, (_, j) => taps.slice(j * m, (j + 1) * m));
  if (origin === null) return kernel(rows);
  return kernel(rows, { origin: { x: Math.round(origin.x * (m - 1)), y: Math.round(origin.y * (n - 1)) } });
}

const sampleType = (sample: Recipe["sample"]): SampleType => (sample === "u8-clamped" ? "u8" : (sample as SampleType));

function ruleOf(made: Recipe, name: RuleName, zeroSum: boolean): BorderRule {
  if (name === "renormalised") return zeroSum ? "replicate" : name;
  if (name !== "constant" && name !== "constants") return name;
  const sample = sampleType(made.sample);
  const constant = (part: number): number => (sample === "f32" ? part - 0.25 : Math.floor(part * fullValue[sample]));
  const parts = [0.3, 1, 0.7, 0.5].slice(0, made.channels).map(constant);
  return { constant: name === "constant" ? parts[0]! : parts };
}

function borderOf(made: Recipe, zeroSum: boolean): Border {
  const rows = ruleOf(made, made.rows, zeroSum);
  return made.columns === null ? rows : { rows, columns: ruleOf(made, made.columns, zeroSum) };
}

function alphaOf({ alpha, channels }: Recipe, taps: number[]): Alpha | undefined {
  if (alpha === undefined || alpha === "none") return alpha;
  if (channels === 1 || channels === 3) return undefined;
  const sum = taps.reduce((total, tap) => total + tap, 0);
  const absoluteSum = taps.reduce((total, tap) => total + Math.abs(tap), 0);
  // Far from the limit of 10⁻⁹ on either side, so that the order of summation decides nothing.
  return alpha === "straight" && Math.abs(sum) <= 1e-6 * absoluteSum ? "keep" : alpha;
}

function outputOf({ output, gain, offset }: Recipe): Output {
  return { ...(output && { sample: output }), ...(gain !== undefined && { gain }), ...(offset !== undefined && { offset }) };
}

function regionOf(made: Recipe, extent: Extent): ConvolveOptions["region"] {
  if (made.region === null) return undefined;
  const growth = { same: 0, full: 1, valid: -1 }[extent];
  const along = (count: number, taps: number, start: number, part: number): [number, number] => {
    const results = count + growth * (taps - 1);
    const first = Math.min(results - 1, Math.floor(start * results));
    return [first, Math.max(1, Math.round(part * (results - first)))];
  };
  const [x, width] = along(made.width, made.m, made.region.x, made.region.width);
  const [y, height] = along(made.height, made.n, made.region.y, made.region.height);
  return { x, y, width, height };
}

function imageOf(made: Recipe): Raster {
  const { width, height, channels, rowGap, viewStart, seed } = made;
  const sample = sampleType(made.sample);
  const stride = width * channels + rowGap;
  const all = noiseSamples(sample, viewStart + height * stride, seed);
  const view = all.subarray(viewStart, viewStart + (height - 1) * stride + width * channels);
  const data = made.sample === "u8-clamped" ? new Uint8ClampedArray(view.buffer, view.byteOffset, view.length) : view;
  vary(made, data, fullValue[sample]);
  return { data, width, height, channels, stride };
}

/** Turns noise into the kind of image that is asked for. */
function vary({ imageKind, seed, channels, width, rowGap }: Recipe, data: Samples, full: number): void {
  const next = noise(seed + 5);
  const float = data instanceof Float32Array;
  const stride = width * channels + rowGap;
  for (let index = 0; index < data.length; index++) {
    const chance = next();
    if (imageKind === "extremes") data[index] = chance < 0.5 ? 0 : full;
    if (imageKind === "sparse" && chance < 0.9) data[index] = 0;
    if (imageKind === "opaque" && (index % stride) % channels === channels - 1) data[index] = full;
    if (imageKind === "beyond" && float && (index % stride) % channels !== channels - 1) data[index] = data[index]! * 40 - 10;
    if (imageKind === "denormal" && float && chance < 0.5) data[index] = data[index]! * (chance < 0.3 ? 1e-40 : 1e-28 * chance);
    if (imageKind === "not-finite" && float && chance < 0.01) data[index] = [NaN, Infinity, -Infinity][Math.floor(300 * chance)]!;
  }
}
