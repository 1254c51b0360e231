import { workOf } from "../api/work.js";
import { gaussian } from "../kernels/index.js";
import { priceOf, type Prices } from "../planning/cost.js";
import type { Engine, ProfileCheck } from "../types.js";
import type { Experiment } from "./experiments.js";
import type { Inputs } from "./inputs.js";
import type { Stopwatch } from "./stopwatch.js";
import { begin, summed, timeInTurns } from "./timing.js";

/** Problems like those of users, none of which prices are fitted to: their widths are odd. */
function problems(): Experiment[] {
  const bell = gaussian({ sigma: 3.5, radius: 10 });
  return [
    {
      name: "641×427×4 u8, 21×21",
      layout: { width: 641, height: 427, channels: 4, sample: "u8" },
      kernel: bell,
      options: { alpha: "none", method: "separable" },
    },
    { name: "641×427×1 f32, 21×21", layout: { width: 641, height: 427, channels: 1, sample: "f32" }, kernel: bell, options: { method: "fft" } },
    { name: "641×427×1 f32, 21×21", layout: { width: 641, height: 427, channels: 1, sample: "f32" }, kernel: bell, options: { method: "separable" } },
    { name: "321×213×1 u8, 21×21", layout: { width: 321, height: 213, channels: 1, sample: "u8" }, kernel: bell, options: { method: "direct" } },
  ];
}

const rounds = 2;

/** Holds the prices against runs that they were not fitted to, as many as the time allows. */
export async function timeChecks(
  engine: Engine,
  prices: Prices,
  inputs: Inputs,
  stopwatch: Stopwatch,
  until: number,
  progress: () => void,
): Promise<ProfileCheck[]> {
  const checks: ProfileCheck[] = [];
  for (const problem of problems()) {
    const { name, layout, kernel, options } = problem;
    const work = workOf(options.method, engine.build, kernel, layout, options);
    if (!work) continue;
    const predicted = priceOf(work.run, prices) / 1e6;
    await stopwatch.pause();
    if (stopwatch.now() + (rounds + 2) * stopwatch.sampleMilliseconds(predicted) > until) continue;
    const timed = begin(engine, problem, inputs);
    if (!timed) continue;
    try {
      await timeInTurns([timed], rounds, () => predicted, stopwatch, progress);
    } finally {
      timed.filter.dispose();
    }
    const sum = summed(timed.samples);
    if (sum)
      checks.push({ problem: name, method: options.method, predicted: Number(predicted.toPrecision(4)), measured: Number(sum.milliseconds.toPrecision(4)) });
  }
  return checks;
}
