import { ConvolutionError } from "../errors.js";
import { clockStep, rest, type Clock } from "./clock.js";

/** A sample lasts at least so long, and so many steps of the clock: then the step is a few per cent of it. */
const leastMilliseconds = 0.8;
const leastSteps = 10;
/** But no longer than this, however coarse the clock is, so that no page freezes: the error is told instead. */
const mostMilliseconds = 60;
/** Nothing is run in less. */
const leastExpected = 1e-4;
/** A clock that shows the same so often stands still. */
const mostQuestions = 4_000_000;
/** Work between two looks at the clock. */
const lookMilliseconds = 0.1;
/** Time that passes between two rests. */
const restMilliseconds = 12;

/** A clock whose step is longer than this is waited for: a sample begins when it has just moved. */
const coarseMilliseconds = 0.05;

/** Samples that the clock spoils are left out; where it spoils more than this many, and this share of all, it is of no use. */
const mostSpoilt = { count: 8, share: 0.25 };

/** A sample that takes a second, and so many times as long as it should: the machine slept, or the clock was put forward. */
const beyond = { milliseconds: 1000, times: 20 };

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
   * Runs a thing again and again until a sample is long enough. Nothing where the clock was put back or forward meanwhile.
   *
   * @param expected milliseconds of one run, roughly: bounds how often a clock is asked that stands still
   * @throws ConvolutionError `clock-unusable` where it does, or is put back or forward again and again
   */
  sample(run: () => void, expected: number): Sample | undefined {
    const least = this.#least;
    const often = Math.max(1, Math.floor(lookMilliseconds / Math.max(expected, leastExpected)));
    const mostRuns = 4 + Math.ceil((20 * least + 20 * this.step + 200) / Math.max(expected, leastExpected));
    const begun = this.#tick();
    let [runs, now, next] = [0, begun, 1];
    while (now >= begun && now - begun < least && runs < mostRuns) {
      for (let turn = 0; turn < next; turn++) run();
      runs += next;
      // Not all at once: what is expected may be of another machine.
      next = Math.min(often, 2 * next);
      now = this.#clock.now();
    }
    // Runs that are far quicker than expected are over before a coarse clock has moved.
    if (now === begun && expected > leastExpected && this.#moves(now)) return this.sample(run, expected / 16);
    return this.#sampleOf(runs, now - begun, expected);
  }

  #sampleOf(runs: number, milliseconds: number, expected: number): Sample | undefined {
    if (milliseconds === 0) throw standsStill(runs);
    this.#taken++;
    const most = beyond.milliseconds + beyond.times * (this.#least + expected);
    if (!(milliseconds > 0 && milliseconds <= most)) {
      this.#spoilt++;
      if (this.#spoilt > mostSpoilt.count && this.#spoilt > mostSpoilt.share * this.#taken) throw isMoved(this.#spoilt, this.#taken);
      return undefined;
    }
    // Each end lies anywhere within a step: a uniform distribution has a standard deviation of a step through √12.
    return { milliseconds: milliseconds / runs, clockError: this.step / milliseconds / Math.sqrt(6) };
  }

  /** The same for a thing that is waited for. */
  async sampleAsync(run: () => Promise<unknown>, expected: number): Promise<Sample | undefined> {
    const mostRuns = Math.max(1, Math.ceil((20 * this.#least + 200) / Math.max(expected, leastExpected)));
    const begun = this.#tick();
    let [runs, now] = [0, begun];
    while (now >= begun && now - begun < this.#least && runs < mostRuns) {
      await run();
      this.#signal?.throwIfAborted();
      runs++;
      now = this.#clock.now();
    }
    if (now === begun && expected > leastExpected && this.#moves(now)) return this.sampleAsync(run, expected / 16);
    this.#rested = now;
    return this.#sampleOf(runs, now - begun, expected);
  }

  /** The time; of a coarse clock, when it has just moved. */
  #tick(): number {
    const now = this.#clock.now();
    return this.step > coarseMilliseconds && this.#moves(now) ? this.#clock.now() : now;
  }

  /** Waits until the clock shows another time; false where it seems to stand still. */
  #moves(from: number): boolean {
    for (let question = 0; question < mostQuestions; question++) if (this.#clock.now() !== from) return true;
    return false;
  }
}

const standsStill = (runs: number): ConvolutionError =>
  new ConvolutionError("clock-unusable", `The clock stood still while ${runs} runs were to be timed. Measure on a host whose performance.now() counts.`, {
    expected: "a clock that moves forward",
    received: "a clock that stands still",
  });

const isMoved = (spoilt: number, taken: number): ConvolutionError =>
  new ConvolutionError(
    "clock-unusable",
    `The clock went backwards, leapt ahead or told no number during ${spoilt} of ${taken} samples. Measure on a host whose performance.now() counts.`,
    { expected: "a clock that moves forward steadily", received: "a clock that is put back or forward" },
  );
