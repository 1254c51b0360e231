import { ConvolutionError } from "../errors.js";
import { clockStep, rest, type Clock } from "./clock.js";

/** A sample lasts at least so long, and so many steps of the clock: then the step is a few per cent of it. */
const leastMilliseconds = 0.8;
const leastSteps = 10;
/** But no longer than this, however coarse the clock is, so that no page freezes: the error is told instead. */
const mostMilliseconds = 60;
/** Work between two looks at the clock. */
const lookMilliseconds = 0.1;
/** Time that passes between two rests. */
const restMilliseconds = 12;

/** A clock whose step is longer than this is waited for: a sample begins when it has just moved. */
const coarseMilliseconds = 0.05;

/** Samples that the clock spoils are left out; where it spoils more than this many, and this share of all, it is of no use. */
const mostSpoilt = { count: 8, share: 0.25 };

export interface Sample {
  /** Of one run. */
  milliseconds: number;
  /** Standard error that the clock's step makes, as a share. */
  clockError: number;
}

/**
 * Times short things by a clock that may be coarse: a thing is run until the clock has moved far enough. Lets the host do other work in
 * between, and ends when the signal is aborted.
 */
export class Stopwatch {
  readonly #clock: Clock;
  readonly #signal: AbortSignal | undefined;
  readonly step: number;
  #rested: number;
  #shown: number;
  #elapsed = 0;
  #taken = 0;
  #spoilt = 0;

  /** @throws ConvolutionError `clock-unusable` */
  constructor(clock: Clock, signal?: AbortSignal) {
    this.#clock = clock;
    this.#signal = signal;
    this.step = clockStep(clock);
    this.#rested = this.#shown = clock.now();
  }

  /** Milliseconds since the stopwatch was made, as far as the clock moved forward: one that is put back adds nothing, so that budgets end. */
  now(): number {
    const shown = this.#clock.now();
    if (!Number.isFinite(shown)) return this.#elapsed;
    this.#elapsed += Math.max(0, shown - this.#shown);
    this.#shown = shown;
    return this.#elapsed;
  }

  /** About how long a sample of runs takes that last so long each. */
  sampleMilliseconds(run: number): number {
    return Math.max(run, this.#least) + (this.step > coarseMilliseconds ? this.step : 0);
  }

  get #least(): number {
    return Math.min(mostMilliseconds, Math.max(leastMilliseconds, leastSteps * this.step));
  }

  /** Gives way to others from time to time. Rejects with the signal's reason. */
  async pause(): Promise<void> {
    const since = this.#clock.now() - this.#rested;
    if (since >= 0 && since < restMilliseconds) return;
    await rest(this.#clock);
    this.#rested = this.#clock.now();
    this.#signal?.throwIfAborted();
  }

  /**
   * Runs a thing again and again until a sample is long enough. Nothing where the clock was put back meanwhile.
   *
   * @param expected milliseconds of one run, roughly: bounds how often a clock is asked that stands still
   * @throws ConvolutionError `clock-unusable` where it does, or is put back again and again
   */
  sample(run: () => void, expected: number): Sample | undefined {
    const least = this.#least;
    const often = Math.max(1, Math.floor(lookMilliseconds / Math.max(expected, 1e-4)));
    const mostRuns = 4 + Math.ceil((20 * least + 20 * this.step + 200) / Math.max(expected, 1e-4));
    const begun = this.#tick();
    let [runs, now, next] = [0, begun, 1];
    while (now >= begun && now - begun < least && runs < mostRuns) {
      for (let turn = 0; turn < next; turn++) run();
      runs += next;
      // Not all at once: what is expected may be of another machine.
      next = Math.min(often, 2 * next);
      now = this.#clock.now();
    }
    return this.#sampleOf(runs, now - begun);
  }

  #sampleOf(runs: number, milliseconds: number): Sample | undefined {
    if (milliseconds === 0) throw standsStill(runs);
    this.#taken++;
    if (!(milliseconds > 0) || !Number.isFinite(milliseconds)) {
      this.#spoilt++;
      if (this.#spoilt > mostSpoilt.count && this.#spoilt > mostSpoilt.share * this.#taken) throw isPutBack(this.#spoilt, this.#taken);
      return undefined;
    }
    // Each end lies anywhere within a step: a uniform distribution has a standard deviation of a step through √12.
    return { milliseconds: milliseconds / runs, clockError: this.step / milliseconds / Math.sqrt(6) };
  }

  /** The same for a thing that is waited for. */
  async sampleAsync(run: () => Promise<unknown>, expected: number): Promise<Sample | undefined> {
    const mostRuns = Math.max(1, Math.ceil((20 * this.#least + 200) / Math.max(expected, 1e-4)));
    const begun = this.#tick();
    let [runs, now] = [0, begun];
    while (now >= begun && now - begun < this.#least && runs < mostRuns) {
      await run();
      this.#signal?.throwIfAborted();
      runs++;
      now = this.#clock.now();
    }
    this.#rested = now;
    return this.#sampleOf(runs, now - begun);
  }

  /** The time; of a coarse clock, when it has just moved. */
  #tick(): number {
    const now = this.#clock.now();
    if (this.step <= coarseMilliseconds) return now;
    for (let question = 0; question < 4_000_000; question++) {
      const next = this.#clock.now();
      if (next !== now) return next;
    }
    return now;
  }
}

const standsStill = (runs: number): ConvolutionError =>
  new ConvolutionError("clock-unusable", `The clock stood still while ${runs} runs were to be timed. Measure on a host whose performance.now() counts.`, {
    expected: "a clock that moves forward",
    received: "a clock that stands still",
  });

const isPutBack = (spoilt: number, taken: number): ConvolutionError =>
  new ConvolutionError(
    "clock-unusable",
    `The clock went backwards, or told no number, during ${spoilt} of ${taken} samples. Measure on a host whose performance.now() counts.`,
    { expected: "a clock that moves forward", received: "a clock that goes backwards" },
  );
