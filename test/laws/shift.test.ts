import { expect, test } from "vitest";
import { kernelsOfEveryKind } from "../support/kernels.js";
import { largestDifference, ways } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import type { Question } from "../support/questions.js";

const width = 26;
const height = 19;

/** x[r − down, c − right], around the edges. */
function shifted(data: ArrayLike<number>, down: number, right: number): Float32Array {
  return Float32Array.from({ length: width * height }, (_, index) => {
    const row = (Math.floor(index / width) - down + height) % height;
    const column = ((index % width) - right + width) % width;
    return data[row * width + column]!;
  });
}

/** Only the periodic border makes a filter exactly shift-invariant. */
test.each(kernelsOfEveryKind)("filtering and shifting commute with the periodic border: %s", (_, kernel) => {
  const image = noiseImage("f32", width, height, 1, 5);
  const ask = (data: Question["image"]["data"]): Question => ({ image: { ...image, data }, kernel, options: { border: "periodic" } });
  for (const way of ways(ask(image.data))) {
    for (const [down, right] of [
      [1, 0],
      [0, 1],
      [7, 11],
    ] as const) {
      const filteredLast = way.answer(ask(shifted(image.data, down, right)));
      const filteredFirst = shifted(way.answer(ask(image.data)), down, right);
      expect(largestDifference(filteredLast, filteredFirst), `${way.build} ${way.method}`).toBeLessThanOrEqual(2 * way.errorBound);
    }
  }
});
