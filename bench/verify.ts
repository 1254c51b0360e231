import type { Raster } from "../src/index.js";
import { define } from "../test/reference/definition.js";
import { fullValue } from "../test/reference/samples.js";
import type { Case } from "./cases.js";

/** Rows and columns at which results are compared with the definition, as parts of the whole: corners, edges, inside. */
const places = [0, 0.003, 0.21, 0.5, 0.77, 1];

/** Float rounding that other people's programs may show, over Σ|taps| · the largest sample. */
export const yardstickTolerance = 1e-5;

/**
 * Compares a result with the definition in double precision at 36 places.
 *
 * @param tolerance largest difference allowed, in units of the result, before it is rounded
 * @returns the largest difference found, in units of the result
 */
export function verify(one: Case, image: Raster, result: ArrayLike<number>, tolerance: number): number {
  const { width, height, channels } = one.layout;
  const integers = one.layout.sample !== "f32";
  const rounding = integers ? 0.5 : 0;
  const held = (exact: number): number => (integers ? Math.max(0, Math.min(exact, fullValue[one.layout.sample])) : exact);
  let largest = 0;
  for (const down of places) {
    for (const across of places) {
      const x = Math.round(across * (width - 1));
      const y = Math.round(down * (height - 1));
      const { exact } = define(image, one.kernel, { ...regionless(one), region: { x, y, width: 1, height: 1 } }, one.options.correlate);
      for (let channel = 0; channel < channels; channel += 1) {
        const difference = Math.abs(result[(y * width + x) * channels + channel]! - held(exact[channel]!));
        if (!(difference <= tolerance + rounding))
          throw new Error(`${one.name}: off by ${difference} at row ${y}, column ${x}; ${tolerance + rounding} is allowed`);
        largest = Math.max(largest, difference);
      }
    }
  }
  return largest;
}

function regionless({ options }: Case): Omit<Case["options"], "correlate" | "region"> {
  const { correlate: _correlate, region: _region, ...rest } = options;
  return rest;
}
