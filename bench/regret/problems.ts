import type { Border, BorderRule, Channels, Layout, Light, PrepareOptions, SampleType } from "../../src/index.js";
import { heldOutWidth } from "../heldOut.js";
import { drawsOf, oneOf, spreadEvenly, wholeNumber, type Draw } from "./draw.js";
import { drawTaps, isSigned, type Taps } from "./taps.js";

/** A problem that no price was fitted to. The same seed and index give the same one everywhere. */
export interface HeldOut {
  index: number;
  name: string;
  layout: Required<Layout>;
  taps: Taps;
  options: PrepareOptions;
}

export const seed = 7;

/** Sides of images, sides of kernels. */
const [shortest, longest] = [16, 4000];

function drawLayout(draw: Draw): Required<Layout> {
  const side = spreadEvenly(draw, shortest, longest);
  const aspect = draw() < 0.4 ? 4 / 3 : spreadEvenly(draw, 1 / 12, 12);
  const within = (samples: number): number => Math.min(longest - 1, Math.max(shortest, Math.round(samples)));
  return {
    width: heldOutWidth(within(side * Math.sqrt(aspect))),
    height: within(side / Math.sqrt(aspect)),
    channels: oneOf<Channels>(draw, [1, 1, 1, 2, 3, 3, 4, 4, 4]),
    sample: oneOf<SampleType>(draw, ["u8", "u8", "u8", "u16", "f32", "f32", "f32"]),
  };
}

const rules: readonly BorderRule[] = [
  "replicate",
  "replicate",
  "zero",
  "periodic",
  "half-sample-symmetric",
  "whole-sample-symmetric",
  "renormalised",
  { constant: 1 },
];

function drawBorder(draw: Draw, taps: Taps): Border {
  const rule = (): BorderRule => {
    const drawn = oneOf(draw, rules);
    return drawn === "renormalised" && isSigned(taps) ? "replicate" : drawn;
  };
  const [rows, columns] = [rule(), rule()];
  return draw() < 0.1 ? { rows, columns } : rows;
}

function drawRegion(draw: Draw, { width, height }: Layout): NonNullable<PrepareOptions["region"]> {
  const cut = (samples: number): [start: number, count: number] => {
    const count = Math.max(1, Math.round(samples * spreadEvenly(draw, 0.1, 1)));
    return [wholeNumber(draw, 0, samples - count), count];
  };
  const [[x, columns], [y, rows]] = [cut(width), cut(height)];
  return { x, y, width: columns, height: rows };
}

/** A level of bytes in other samples. */
const levels: Record<SampleType, number> = { u8: 1, u16: 257, f32: 1 / 255 };

function drawOptions(draw: Draw, layout: Required<Layout>, taps: Taps): PrepareOptions {
  const options: PrepareOptions = { border: drawBorder(draw, taps) };
  const [alpha, light, output, region, full, exact] = Array.from({ length: 6 }, draw) as [number, number, number, number, number, number];
  if (layout.channels % 2 === 0) options.alpha = isSigned(taps) || alpha < 0.45 ? "none" : oneOf(draw, ["straight", "straight", "keep", "premultiplied"]);
  if (light < 0.12) options.light = "linear" satisfies Light;
  if (output < 0.15) options.output = { sample: "f32" };
  if (region < 0.1) options.region = drawRegion(draw, layout);
  else if (full < 0.05) options.extent = "full";
  if (taps.tolerance !== undefined) options.tolerance = Number((taps.tolerance * levels[layout.sample]).toPrecision(3));
  else if (exact < 0.1) options.tolerance = 0;
  return options;
}

const printed = (options: PrepareOptions): string =>
  Object.entries(options)
    .map(([name, value]) => `${name} ${typeof value === "object" ? JSON.stringify(value).replaceAll('"', "") : String(value)}`)
    .join(", ");

export function problemAt(index: number): HeldOut {
  const draw = drawsOf(seed, index);
  const layout = drawLayout(draw);
  const taps = drawTaps(draw);
  const options = drawOptions(draw, layout, taps);
  const { width, height, channels, sample } = layout;
  return { index, name: `${width}×${height}×${channels} ${sample}, ${taps.name}, ${printed(options)}`, layout, taps, options };
}
