import { box, gaussian, kernel, outer, type Channels, type Kernel, type Layout, type PrepareOptions, type SampleType } from "../../src/index.js";
import { noise } from "../../test/support/noise.js";
import { structureless } from "../cases.js";
import { fittedWidth } from "../heldOut.js";

/** One question whose methods are timed. Kernels are made anew for each preparation: what is known of a kernel is kept with it. */
export interface Question {
  name: string;
  layout: Required<Layout>;
  makeKernel: () => Kernel;
  options: PrepareOptions;
}

type Draw = () => number;

const oneOf = <T>(draw: Draw, values: readonly T[]): T => values[Math.floor(draw() * values.length)]!;

/** low · (high / low)^draw, rounded: as many small values as large ones. */
const spreadEvenly = (draw: Draw, low: number, high: number): number => Math.round(low * (high / low) ** draw());

const bell = (width: number, height: number): Kernel =>
  gaussian({ sigma: { x: Math.max(0.5, width / 6), y: Math.max(0.5, height / 6) }, radius: { x: (width - 1) / 2, y: (height - 1) / 2 } });

/** A line of motion: two taps a row, all others 0. */
const diagonal = (taps: number): Kernel =>
  kernel(Array.from({ length: taps }, (_, j) => Array.from({ length: taps }, (_, i) => (i === j || i === j + 1 ? 1 / (2 * taps - 1) : 0))));

/** Kernels of every kind that a method may claim: no structure, one outer product, one row, one column, few taps, boxes. */
function drawKernel(draw: Draw): { name: string; make: () => Kernel } {
  const odd = (): number => 2 * spreadEvenly(draw, 1, 32) + 1;
  const width = odd();
  const height = draw() < 0.8 ? width : odd();
  const kind = draw();
  if (kind < 0.45) return { name: `any ${width}×${height}`, make: () => structureless(width, height) };
  if (kind < 0.75) return { name: `bell ${width}×${height}`, make: () => bell(width, height) };
  if (kind < 0.8)
    return {
      name: `row of ${width}`,
      make: () =>
        outer(
          [1],
          Array.from({ length: width }, () => 1 / width + 0.001 / (width + 1)),
        ),
    };
  if (kind < 0.85) return { name: `column of ${height}`, make: () => bell(1, height) };
  if (kind < 0.9) return { name: `diagonal ${width}×${width}`, make: () => diagonal(width) };
  return { name: `box ${width}×${height}`, make: () => box({ width, height }) };
}

const shapes = { square: [1, 1], photograph: [4, 3], wide: [12, 1], tall: [1, 12] } as const;

function drawLayout(draw: Draw): Required<Layout> {
  const [across, down] = shapes[oneOf(draw, ["square", "photograph", "photograph", "wide", "tall"] as const)];
  const side = Math.sqrt(spreadEvenly(draw, 24 * 24, 1_600_000) / (across * down));
  const sample = oneOf<SampleType>(draw, ["u8", "u8", "u16", "f32", "f32"]);
  const channels = oneOf<Channels>(draw, [1, 1, 3, 4, 4]);
  return { width: fittedWidth(side * across), height: Math.max(1, Math.round(side * down)), channels, sample };
}

function drawOptions(draw: Draw, { channels, sample }: Required<Layout>): PrepareOptions {
  const options: PrepareOptions = {};
  if (channels === 4) options.alpha = draw() < 0.6 ? "none" : "straight";
  if (draw() < 0.15) options.light = "linear";
  if (draw() < 0.25) options.output = { sample: oneOf(draw, ["u8", "u16", "f32"]), gain: sample === "u16" ? 1 / 257 : 1 };
  if (draw() < 0.2) options.border = oneOf(draw, ["zero", "periodic", "half-sample-symmetric"] as const);
  if (draw() < 0.1) options.extent = "full";
  if (draw() < 0.2) options.tolerance = 0;
  return options;
}

function drawn(count: number, seed: number): Question[] {
  const draw = noise(seed);
  for (let early = 0; early < 8; early += 1) draw();
  return Array.from({ length: count }, () => {
    const layout = drawLayout(draw);
    const taps = drawKernel(draw);
    const options = drawOptions(draw, layout);
    return { name: `${nameOf(layout)}, ${taps.name} ${JSON.stringify(options)}`, layout, makeKernel: taps.make, options };
  });
}

const nameOf = ({ width, height, channels, sample }: Required<Layout>): string => `${width}×${height}×${channels} ${sample}`;

/** Photographs around the places where one method overtakes another: what most users ask. */
function nearCrossovers(): Question[] {
  const photographs: Required<Layout>[] = [
    { width: 1920, height: 1080, channels: 1, sample: "f32" },
    { width: 1200, height: 800, channels: 4, sample: "u8" },
    { width: 512, height: 512, channels: 1, sample: "u8" },
    { width: 128, height: 128, channels: 4, sample: "u8" },
  ];
  return photographs.flatMap((layout) => {
    const options: PrepareOptions = layout.channels === 4 ? { alpha: "none" } : {};
    const any = [3, 5, 7, 9, 13].map((taps) => ({ name: `${nameOf(layout)}, any ${taps}×${taps}`, layout, makeKernel: () => structureless(taps), options }));
    const bells = [3, 9, 17, 25, 41].map((taps) => ({ name: `${nameOf(layout)}, bell ${taps}×${taps}`, layout, makeKernel: () => bell(taps, taps), options }));
    const boxes = [5, 31].map((taps) => ({ name: `${nameOf(layout)}, box ${taps}×${taps}`, layout, makeKernel: () => box(taps), options }));
    return [...any, ...bells, ...boxes];
  });
}

export const seed = 20;

/** The experiment: drawn questions, which keep the coefficients apart, and photographs. */
export const questions = (): Question[] => [...drawn(110, seed), ...nearCrossovers()];
