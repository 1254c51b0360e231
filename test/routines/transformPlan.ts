import { rootsOfUnity } from "../../src/math/rootsOfUnity.js";
import type { Bench } from "./bench.js";

/** Plan and turns in memory, as fft/transform.ts draws them, for radices in any order. */
export function placePlan(bench: Bench, radices: readonly number[]): number {
  const points = radices.reduce((product, radix) => product * radix, 1);
  const { cosine, sine } = rootsOfUnity(points);
  const entries = [radices.length];
  let span = points;
  for (const radix of radices) {
    const turns: number[] = [];
    for (let j = 0; j < span / radix; j++) for (let k = 1; k < radix; k++) turns.push(cosine[(j * k * points) / span]!, -sine[(j * k * points) / span]!);
    entries.push(radix, span, bench.place(Float32Array.from(turns)));
    span /= radix;
  }
  return bench.place(Int32Array.from(entries));
}
