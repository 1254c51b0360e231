import type { Engine, Method, Raster, ResultRaster } from "../../src/index.js";
import type { Outcome } from "./measure.js";

/** Two methods beside each other on the same image. */
export interface Agreement {
  methods: [Method, Method];
  /** Largest difference of what was written, in levels, and the largest that the two bounds allow. */
  written: { largest: number; allowed: number };
  /** The same before rounding, over a part of the image. */
  unrounded: { largest: number; allowed: number };
  holds: boolean;
}

/** Columns and rows of the part in which results are compared before rounding. */
const part = { width: 384, height: 256 };

/**
 * Compares every two methods that apply. Exact results x and y with |x − y| ≤ b, the sum of the two bounds, are written as
 * ⌊x + ½⌋ and ⌊y + ½⌋, which differ by less than b + 1: by ⌈b⌉ at most.
 */
export function agreementsOf(engine: Engine, outcome: Outcome, image: Raster): Agreement[] {
  const floats = outcome.results.map(({ method }) => unroundedPart(engine, outcome, image, method));
  return outcome.results.flatMap((first, i) =>
    outcome.results.slice(i + 1).map((second, offset) => {
      const j = i + 1 + offset;
      const written = { largest: largestDifference(first.raster, second.raster), allowed: Math.ceil(first.errorBound + second.errorBound) };
      const unrounded = { largest: largestDifference(floats[i].raster, floats[j].raster), allowed: floats[i].errorBound + floats[j].errorBound };
      const holds = written.largest <= written.allowed && unrounded.largest <= unrounded.allowed;
      return { methods: [first.method, second.method] as [Method, Method], written, unrounded, holds };
    }),
  );
}

function unroundedPart(engine: Engine, { job, layout }: Outcome, image: Raster, method: Method): { raster: ResultRaster; errorBound: number } {
  const width = Math.min(part.width, layout.width);
  const height = Math.min(part.height, layout.height);
  const region = { x: (layout.width - width) >> 1, y: (layout.height - height) >> 1, width, height };
  const filter = engine.prepare(job.kernel, layout, { ...job.options, method, region, output: { ...job.options.output, sample: "f32" } });
  const raster = filter.run(image);
  const { errorBound } = filter.explanation;
  filter.dispose();
  return { raster, errorBound };
}

/** Over the samples that both have: a method that was given fewer rows has the first ones. */
function largestDifference(a: ResultRaster, b: ResultRaster): number {
  const count = Math.min(a.data.length, b.data.length);
  let largest = 0;
  for (let index = 0; index < count; index += 1) largest = Math.max(largest, Math.abs(a.data[index] - b.data[index]));
  return largest;
}
