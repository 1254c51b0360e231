import FFT from "fft.js";
import type { Contender } from "../contender.js";
import { processorMilliseconds } from "../processorTime.js";

/** A batch of forward transforms by fft.js, in doubles, one row after the other. Lengths are powers of two. */
export function fftJsTransforms(points: number, batch: number): Contender {
  const transform = new FFT(points);
  const rows = Array.from({ length: batch }, (_, row) => Float64Array.from({ length: 2 * points }, (_unused, k) => ((row * 31 + k * 17) % 64) / 32 - 1));
  const results = rows.map((row) => row.slice());
  return {
    name: "fft.js, rows",
    run() {
      const begun = processorMilliseconds();
      for (let row = 0; row < batch; row += 1) transform.transform(results[row] as unknown as number[], rows[row] as unknown as number[]);
      return processorMilliseconds() - begun;
    },
  };
}
