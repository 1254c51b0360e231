import { workOf } from "../api/work.js";
import { box, type Kernel } from "../kernels/index.js";
import { priceOf, type Prices } from "../planning/cost.js";
import { mayWait } from "../runtime/workers/board.js";
import type { Engine, Layout, Method, Raster } from "../types.js";
import type { Observation } from "./estimate.js";
import type { Inputs } from "./inputs.js";
import type { Sample, Stopwatch } from "./stopwatch.js";
import { summed } from "./timing.js";

interface Shared {
  layout: Required<Layout>;
  kernel: Kernel;
  method: Method;
}

/** A call to others and little else; phases in which all wait for each other; many bytes to hand over. */
function problems(): Shared[] {
  const [three, thirtyOne] = [box(3), box(31)];
  const gray = { channels: 1, sample: "f32" } as const;
  return [
    { layout: { width: 256, height: 128, ...gray }, kernel: three, method: "direct" },
    { layout: { width: 256, height: 256, ...gray }, kernel: thirtyOne, method: "fft" },
    { layout: { width: 1024, height: 1024, ...gray }, kernel: three, method: "direct" },
    { layout: { width: 768, height: 512, ...gray }, kernel: thirtyOne, method: "fft" },
  ];
}

const rounds = 5;

/** Handing over is free here, so that small problems are shared too. */
const eager = (prices: Prices): Prices => ({ ...prices, handOver: 0, meeting: 0, handedByte: 0 });

/** Times problems that all threads share, as many as the time allows. */
export async function timeTeam(
  makeEngine: (prices: Prices) => Engine,
  shared: boolean,
  prices: Prices,
  inputs: Inputs,
  stopwatch: Stopwatch,
  until: number,
): Promise<Observation[]> {
  const engine = makeEngine(eager(prices));
  const crew = { threads: engine.threads, shared };
  const observations: Observation[] = [];
  for (const { layout, kernel, method } of problems()) {
    const work = workOf(method, engine.build, kernel, layout, { method }, { crew, prices: eager(prices) });
    if (!work || (work.run.handOver ?? 0) === 0) continue;
    const filter = engine.prepare(kernel, layout, { method });
    try {
      const samples: Sample[] = [];
      const [image, target] = [inputs.source(layout), inputs.target(layout, layout.sample)];
      const expected = priceOf(work.run, prices) / 1e6;
      for (let round = 0; round < rounds && stopwatch.now() < until; round++) {
        await stopwatch.pause();
        const sample = await sampleOf(
          () => filter.run(image, target),
          () => filter.runAsync(image, { target }),
          expected,
          stopwatch,
        );
        if (round > 0 && sample) samples.push(sample);
      }
      const sum = summed(samples);
      if (sum) observations.push({ counts: work.run, nanoseconds: sum.milliseconds * 1e6, noise: sum.noise });
    } finally {
      filter.dispose();
    }
  }
  return observations;
}

/** The page's main thread may not wait for others: there `run` would use one thread. */
function sampleOf(
  run: () => Raster,
  runAsync: () => Promise<Raster>,
  expected: number,
  stopwatch: Stopwatch,
): Promise<Sample | undefined> | Sample | undefined {
  return mayWait() ? stopwatch.sample(run, expected) : stopwatch.sampleAsync(runAsync, expected);
}
