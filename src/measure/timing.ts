import { unlessShort } from "../errors.js";
import type { Engine, Filter, Raster } from "../types.js";
import type { Experiment } from "./experiments.js";
import type { Inputs } from "./inputs.js";
import type { Sample, Stopwatch } from "./stopwatch.js";

/** An experiment under way. */
export interface Timed {
  filter: Filter;
  run: () => void;
  samples: Sample[];
}

/** A filter; nothing where the engine has too little memory for it. */
export const prepared = (engine: Engine, { kernel, layout, options }: Omit<Experiment, "name">): Filter | undefined =>
  unlessShort(() => engine.prepare(kernel, layout, options) as Filter);

/** Prepares an experiment; nothing where the engine has too little memory for it. */
export function begin(engine: Engine, experiment: Experiment, inputs: Inputs): Timed | undefined {
  const { layout, options } = experiment;
  const filter = prepared(engine, experiment);
  if (!filter) return undefined;
  const image: Raster = inputs.source(layout);
  const target = inputs.target(layout, options.output?.sample ?? layout.sample);
  return { filter, run: () => void filter.run(image, target), samples: [] };
}

/**
 * Times the experiments in turns, so that whatever changes meanwhile changes all of them. The first runs of each are not counted.
 *
 * @param progress called after each sample
 */
export async function timeInTurns(
  timed: readonly Timed[],
  rounds: number,
  expected: (one: Timed) => number,
  stopwatch: Stopwatch,
  progress: () => void,
): Promise<void> {
  for (let round = 0; round <= rounds; round++) {
    for (const one of timed) {
      await stopwatch.pause();
      if (round === 0) {
        one.run();
        one.run();
        continue;
      }
      const sample = stopwatch.sample(one.run, expected(one));
      if (sample) one.samples.push(sample);
      progress();
    }
  }
}

/** What the samples of an experiment say. */
export interface Summary {
  /** Of one run: the lower quartile, as what disturbs a run makes it longer and never shorter. */
  milliseconds: number;
  /** Standard error of that as a share of it: of the clock's step, and of what the faster half of the samples differ by. */
  noise: number;
}

/** Nothing where there is no sample. */
export function summed(samples: readonly Sample[]): Summary | undefined {
  const sorted = samples.toSorted((a, b) => a.milliseconds - b.milliseconds);
  const quarter = sorted[(sorted.length - 1) >> 2];
  const middle = sorted[(sorted.length - 1) >> 1];
  if (!quarter || !middle) return undefined;
  return {
    milliseconds: quarter.milliseconds,
    noise: Math.hypot(quarter.clockError, (middle.milliseconds - sorted[0]!.milliseconds) / quarter.milliseconds / 2),
  };
}
