import { ConvolutionError } from "../errors.js";
import type { Engine, Filter, Raster } from "../types.js";
import type { Experiment } from "./experiments.js";
import type { Inputs } from "./inputs.js";
import type { Sample, Stopwatch } from "./stopwatch.js";

/** An experiment under way. */
export interface Timed {
  experiment: Experiment;
  filter: Filter;
  run: () => void;
  samples: Sample[];
  /** Milliseconds of preparing it again, when the routines were warm and the kernel known. */
  prepared: number | undefined;
}

const codesOfShortage = ["memory-limit", "memory-exhausted"];

/** Prepares an experiment; nothing where the engine has too little memory for it. */
export function begin(engine: Engine, experiment: Experiment, inputs: Inputs): Timed | undefined {
  const { layout, kernel, options } = experiment;
  try {
    const filter: Filter = engine.prepare(kernel, layout, options);
    const image: Raster = inputs.source(layout);
    const target = inputs.target(layout, options.output?.sample ?? layout.sample);
    return { experiment, filter, run: () => void filter.run(image, target), samples: [], prepared: undefined };
  } catch (error) {
    if (error instanceof ConvolutionError && codesOfShortage.includes(error.code)) return undefined;
    throw error;
  }
}

/** Times the experiments in turns, so that whatever changes meanwhile changes all of them. The first runs of each are not counted. */
export async function timeInTurns(timed: readonly Timed[], rounds: number, expected: (one: Timed) => number, stopwatch: Stopwatch): Promise<void> {
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
    }
  }
}

/** Standard deviation of normal numbers over the mean range of three (Tippett, Biometrika 17: 364, 1925), and of their median over theirs. */
const ofRange = 1 / 1.693;
const ofMedian = 0.67;

/** What the samples of an experiment say. */
export interface Summary {
  /** Of one run: the median. */
  milliseconds: number;
  /** Standard error of that as a share of it: of the clock's step, and of what the samples differ by. */
  noise: number;
}

/** Nothing where there is no sample. */
export function summed(samples: readonly Sample[]): Summary | undefined {
  const sorted = samples.toSorted((a, b) => a.milliseconds - b.milliseconds);
  const middle = sorted[(sorted.length - 1) >> 1];
  if (!middle) return undefined;
  const range = (sorted.at(-1)!.milliseconds - sorted[0]!.milliseconds) / middle.milliseconds;
  return { milliseconds: middle.milliseconds, noise: Math.hypot(middle.clockError, ofMedian * ofRange * range) };
}
