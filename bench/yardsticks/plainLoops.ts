import type { Raster } from "../../src/index.js";
import type { Case } from "../cases.js";
import type { Contender } from "../contender.js";
import { processorMilliseconds } from "../processorTime.js";
import { verify, yardstickTolerance } from "../verify.js";

/** The definition as four loops in TypeScript over one f32 plane, zero border: what one writes in an afternoon. */
export function plainLoops(one: Case, planes: readonly Raster[]): Contender {
  const { width, height } = one.layout;
  const result = new Float32Array(width * height);
  const taps = Float32Array.from(one.kernel.taps.toReversed());
  const filter = (plane: number): void =>
    convolvePlainly(result, planes[plane % planes.length]!.data as Float32Array, taps, width, height, one.kernel.width, one.kernel.height);
  return {
    name: "plain TypeScript loops",
    run(plane) {
      const begun = processorMilliseconds();
      filter(plane);
      return processorMilliseconds() - begun;
    },
    verify() {
      filter(0);
      return verify(one, planes[0]!, result, yardstickTolerance);
    },
  };
}

/** result[r, c] = Σ taps[j, i] · image[r + j − ⌊n/2⌋, c + i − ⌊m/2⌋], nothing outside the image; m, n odd. */
function convolvePlainly(result: Float32Array, image: Float32Array, taps: Float32Array, width: number, height: number, m: number, n: number): void {
  for (let r = 0; r < height; r += 1) {
    for (let c = 0; c < width; c += 1) {
      let sum = 0;
      for (let j = 0; j < n; j += 1) {
        const y = r + j - (n >> 1);
        if (y < 0 || y >= height) continue;
        for (let i = 0; i < m; i += 1) {
          const x = c + i - (m >> 1);
          if (x >= 0 && x < width) sum += taps[j * m + i]! * image[y * width + x]!;
        }
      }
      result[r * width + c] = sum;
    }
  }
}
