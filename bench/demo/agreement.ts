import type { Engine, Method, Raster, ResultRaster } from "../../src/index.js";
import type { Outcome } from "./measure.js";

/** Two methods beside each other on the same image. */
export interface Agreement {
  methods: [Method, Method];
  /** Largest difference of what was written, in levels, and the largest that the two bounds allow. */
  written: { largest: number; allowed: number };
  /** The same before rounding, over a part of the image. */
  unrounded: { largest: number; allowed: number };
  /** Colours were compared times their alpha, which is what the bounds hold for where there is alpha. */
  premultiplied: boolean;
  holds: boolean;
}

/** One method's result with the bound it was promised within, and the value that an opaque alpha has in it. */
interface Side {
  raster: ResultRaster;
  errorBound: number;
  opaque: number;
}

/** Columns and rows of the part in which results are compared before rounding. */
const part = { width: 384, height: 256 };

const fullValue = { u8: 255, u16: 65535, f32: 1 } as const;

/**
 * Compares every two methods that apply.
 *
 * Exact results x and y with |x − y| ≤ b, the sum of the two bounds, are written as ⌊x + ½⌋ and ⌊y + ½⌋, which differ by
 * less than b + 1: by ⌈b⌉ at most. With alpha the bounds hold for p = x · a. Writing a clamped alpha turns a difference
 * of b into 2b at most, and rounding x and a by ½ each moves p by 1 at most on each side: 2b + 2.
 * Floats are divided, written and multiplied again here: 4 roundings of 2⁻²⁴ of the full value.
 */
export function agreementsOf(engine: Engine, outcome: Outcome, image: Raster): Agreement[] {
  const { layout } = outcome;
  const premultiplied = layout.channels % 2 === 0;
  const levels = fullValue[layout.sample];
  const written = outcome.results.map(({ raster, errorBound }): Side => ({ raster, errorBound, opaque: levels }));
  const unrounded = outcome.results.map(({ method }) => unroundedPart(engine, outcome, image, method));
  const compare = (i: number, j: number): Agreement => {
    const bound = written[i].errorBound + written[j].errorBound;
    const floatBound = unrounded[i].errorBound + unrounded[j].errorBound;
    const isFloat = layout.sample === "f32";
    const rounded = isFloat ? bound : Math.ceil(bound);
    const found = {
      written: { largest: largestDifference(written[i], written[j], premultiplied, levels), allowed: premultiplied ? 2 * bound + 2 : rounded },
      unrounded: {
        largest: largestDifference(unrounded[i], unrounded[j], premultiplied, levels),
        allowed: premultiplied ? floatBound + levels * 2 ** -22 : floatBound,
      },
    };
    const holds = found.written.largest <= found.written.allowed && found.unrounded.largest <= found.unrounded.allowed;
    return { methods: [outcome.results[i].method, outcome.results[j].method], ...found, premultiplied, holds };
  };
  return outcome.results.flatMap((_, i) => outcome.results.slice(i + 1).map((_unused, offset) => compare(i, i + 1 + offset)));
}

function unroundedPart(engine: Engine, { job, layout }: Outcome, image: Raster, method: Method): Side {
  const width = Math.min(part.width, layout.width);
  const height = Math.min(part.height, layout.height);
  const region = { x: (layout.width - width) >> 1, y: (layout.height - height) >> 1, width, height };
  const filter = engine.prepare(job.kernel, layout, { ...job.options, method, region, output: { ...job.options.output, sample: "f32" } });
  const raster = filter.run(image);
  const { errorBound } = filter.explanation;
  filter.dispose();
  return { raster, errorBound, opaque: fullValue.f32 };
}

/** Over the samples that both have: a method that was given fewer rows has the first ones. */
function largestDifference(first: Side, second: Side, premultiplied: boolean, levels: number): number {
  const [x, y] = [first.raster.data, second.raster.data];
  const count = Math.min(x.length, y.length);
  let largest = 0;
  if (!premultiplied) {
    for (let index = 0; index < count; index += 1) largest = Math.max(largest, Math.abs(x[index] - y[index]));
    return largest;
  }
  const { channels } = first.raster;
  const faint = (first.errorBound + second.errorBound) / levels;
  for (let pixel = 0; pixel < count; pixel += channels) {
    const alphaOfX = x[pixel + channels - 1] / first.opaque;
    const alphaOfY = y[pixel + channels - 1] / second.opaque;
    largest = Math.max(largest, Math.abs(alphaOfX - alphaOfY) * levels);
    // An alpha that may as well be 0 has no colour: one method may have written it and the other not.
    if (Math.min(alphaOfX, alphaOfY) <= faint) continue;
    for (let index = pixel; index < pixel + channels - 1; index += 1) largest = Math.max(largest, Math.abs(x[index] * alphaOfX - y[index] * alphaOfY));
  }
  return largest;
}
