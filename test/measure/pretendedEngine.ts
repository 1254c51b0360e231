import type { Candidate, Engine, Explanation, Filter, Kernel, Layout, Method, PrepareOptions, Raster } from "../../src/index.js";
import { shippedProfiles } from "../../src/planning/profile.js";
import { ConvolutionError } from "../../src/errors.js";
import type { Chance } from "./chance.js";
import type { PretendedClock } from "./pretendedClock.js";

/** Milliseconds of one run by method, for kernels of so many taps a side. A method that is not there does not apply. */
export type CostSurface = Partial<Record<Method, (size: number) => number>>;

export interface Pretence {
  clock: PretendedClock;
  truth: CostSurface;
  /** What is predicted; the truth where absent. */
  predicted?: CostSurface;
  dice: Chance;
  /** Standard deviation of a run's time as a share of it; drawn anew each millisecond. */
  noise: number;
  /** Part of the milliseconds in which all takes five times as long. */
  disturbed?: number;
  /** This run, counted from 1, takes fifty times as long. */
  disturbedRun?: number;
  /** Filters that there is memory for at one time. */
  mostFilters?: number;
}

/** An engine whose runs do nothing but move a clock: the time of each method is as chosen, with noise. It counts its filters. */
export class PretendedEngine {
  readonly #pretence: Pretence;
  #noisyUntil = 0;
  #factor = 1;
  open = 0;
  mostOpen = 0;
  runs = 0;

  constructor(pretence: Pretence) {
    this.#pretence = pretence;
  }

  get engine(): Engine {
    const profile = shippedProfiles[0]!;
    const refuse = (): never => {
      throw new Error("a pretended engine only explains and prepares");
    };
    return {
      build: "simd",
      threads: 1,
      profile,
      convolve: refuse,
      correlate: refuse,
      dispose: refuse,
      explain: (kernel: Kernel, layout: Layout, options?: PrepareOptions) => this.#explain(kernel, layout, options),
      prepare: (kernel: Kernel, _layout: Layout, options?: PrepareOptions) => this.#prepare(kernel, options) as never,
    };
  }

  #explain({ width: size }: Kernel, _layout: Layout, _options?: PrepareOptions): Explanation {
    const { truth, predicted = truth } = this.#pretence;
    const candidates = (["direct", "separable", "fft", "running-sum"] as const).map((method): Candidate => {
      const cost = predicted[method];
      return cost ? { method, milliseconds: cost(size) } : { method, refused: "It does not apply." };
    });
    const open = candidates.filter(({ refused }) => refused === undefined);
    const { method, milliseconds } = open.reduce((a, b) => (b.milliseconds! < a.milliseconds! ? b : a));
    const rest = {
      arithmetic: "none",
      because: "It is made up.",
      errorBound: 0,
      bytes: 0,
      threads: 1,
      setupMilliseconds: 0,
      build: "simd",
      profile: "made up",
    };
    return { method, milliseconds: milliseconds!, candidates, ...rest } as Explanation;
  }

  #prepare({ width: size }: Kernel, { method }: PrepareOptions = {}): Pick<Filter, "run" | "runAsync" | "dispose"> {
    const { truth, mostFilters = Infinity } = this.#pretence;
    if (this.open >= mostFilters) throw new ConvolutionError("memory-limit", "Made up: no memory.");
    this.mostOpen = Math.max(this.mostOpen, ++this.open);
    const cost = truth[method as Method]!(size);
    const run = (_image?: Raster, target?: Raster) => (this.#pass(cost), target);
    return { run, runAsync: async (_image: unknown, { target }: { target?: Raster } = {}) => run(undefined, target), dispose: () => void this.open-- } as never;
  }

  #pass(milliseconds: number): void {
    const { clock, dice, noise, disturbed = 0 } = this.#pretence;
    this.runs++;
    if (clock.time >= this.#noisyUntil) {
      this.#noisyUntil = clock.time + 1;
      this.#factor = Math.exp(noise * dice.normal()) * (dice.uniform() < disturbed ? 5 : 1);
    }
    clock.time += milliseconds * this.#factor * (this.runs === this.#pretence.disturbedRun ? 50 : 1);
  }
}
