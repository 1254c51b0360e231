import { workOf } from "../api/work.js";
import { insidesOf, type Insides } from "../api/engine.js";
import { checkedNumber, checkOptionNames } from "../kernels/options.js";
import { operationNames, priceOf, type Counts, type Prices } from "../planning/cost.js";
import { hostPacing } from "../runtime/pacing.js";
import type { Engine, HardwareProfile } from "../types.js";
import { timeChecks } from "./checks.js";
import type { Clock } from "./clock.js";
import { mostInformative } from "./design.js";
import { estimate, type Estimate, type Observation } from "./estimate.js";
import { experiments, type Experiment } from "./experiments.js";
import { hostName } from "./host.js";
import { Inputs } from "./inputs.js";
import { checkedSignal } from "./signal.js";
import { Stopwatch } from "./stopwatch.js";
import { timeTeam } from "./team.js";
import { begin, prepared, summed, timeInTurns, type Timed } from "./timing.js";
import type { MeasureProfileOptions } from "./types.js";

const defaultMilliseconds = 2000;
const mostMilliseconds = 600_000;

/** Shares of the time: until here experiments are looked up, and are made; what is left is for the checks. */
const lookingUp = 0.2;
const experimenting = 0.9;
/** With threads, what handing over costs is timed after the rest. */
const experimentingAlone = 0.75;

/** Experiments that are timed in turns, and how often each. */
const batch = 8;
const rounds = 5;

/** Where time is left when all experiments were made, they are made again, so often at most. */
const mostVisits = 4;

/** Predictions should be good for these: every third of the experiments that there are. */
const targetStride = 3;

/** A price is called measured where observing has brought its standard error below this share of what it was before. */
const measuredShare = 0.6;

/** No experiment's preparation takes a second: the machine slept, or the clock was put forward. */
const mostPreparing = 1000;

/** Of one preparation: it is timed once, and much of it is JavaScript whose time no count tells. */
const preparationNoise = 0.5;

interface Candidate extends Experiment {
  counts: Counts;
  setup: Counts;
}

/** One measurement on its way. */
class Measurement {
  readonly #alone: Engine;
  readonly #stopwatch: Stopwatch;
  readonly #known: Prices;
  readonly #inputs = new Inputs();
  readonly #observations: Observation[] = [];
  #experiments = 0;
  #tooLarge = 0;

  constructor(alone: Engine, stopwatch: Stopwatch) {
    this.#alone = alone;
    this.#stopwatch = stopwatch;
    this.#known = alone.profile.nanoseconds as Prices;
  }

  get notes(): string[] {
    const { step } = this.#stopwatch;
    return [
      this.#experiments > 0
        ? `${this.#experiments} experiments.`
        : `Nothing could be measured in the time: the prices are those of ${this.#alone.profile.host}.`,
      ...(step >= 0.5 ? [`The clock has a step of ${Number(step.toPrecision(2))} ms: fewer and longer samples were taken.`] : []),
      ...(this.#tooLarge > 0 ? [`${this.#tooLarge} experiments needed more memory than the engine may take and were left out.`] : []),
    ];
  }

  /** All experiments of this package that the engine's build can make, with what they count. */
  async candidates(until: number): Promise<Candidate[]> {
    const found: Candidate[] = [];
    for (const experiment of experiments()) {
      await this.#stopwatch.pause();
      if (found.length > 0 && this.#stopwatch.now() > until) break;
      const { layout, kernel, options } = experiment;
      const work = workOf(options.method, this.#alone.build, kernel, layout, options);
      if (work) found.push({ ...experiment, counts: work.run, setup: work.setup });
    }
    return found;
  }

  /** Makes the most informative experiments until the time is up or none is left. */
  async experiment(candidates: readonly Candidate[], until: number, progress: () => void): Promise<Estimate> {
    const targets = candidates.filter((_, index) => index % targetStride === 0);
    let left = candidates;
    let visits = 0;
    let found = estimate(this.#observations, this.#known, false);
    // However short the time is, a few experiments are made.
    while (left.length > 0 && (this.#experiments === 0 || this.#stopwatch.now() < until)) {
      const chosen = mostInformative(left, targets, found, batch, (run) => rounds * this.#stopwatch.sampleMilliseconds(run));
      const remaining = until - this.#stopwatch.now();
      const affordable = chosen.filter((index, order) => order === 0 || this.#batchMilliseconds(left[index]!, found) < remaining / batch);
      await this.#make(
        affordable.map((index) => left[index]!),
        found.prices,
        progress,
      );
      left = left.filter((_, index) => !chosen.includes(index));
      if (left.length === 0 && ++visits < mostVisits) left = candidates;
      found = estimate(this.#observations, this.#known, false);
    }
    return estimate(this.#observations, this.#known);
  }

  #batchMilliseconds({ counts }: Candidate, { prices }: Estimate): number {
    return (rounds + 1) * this.#stopwatch.sampleMilliseconds(priceOf(counts, prices) / 1e6);
  }

  async #make(chosen: readonly Candidate[], prices: Prices, progress: () => void): Promise<void> {
    const candidates = new Map<Timed, Candidate>();
    for (const candidate of chosen) {
      await this.#stopwatch.pause();
      const timed = begin(this.#alone, candidate, this.#inputs);
      if (timed) candidates.set(timed, candidate);
      else this.#tooLarge++;
    }
    const timed = [...candidates.keys()];
    try {
      await timeInTurns(timed, rounds, (one) => priceOf(candidates.get(one)!.counts, prices) / 1e6, this.#stopwatch, progress);
      for (const [one, candidate] of candidates) this.#observe(one, candidate);
    } finally {
      for (const { filter } of timed) filter.dispose();
    }
  }

  #observe(timed: Timed, { counts, setup, layout, kernel, options }: Candidate): void {
    const sum = summed(timed.samples);
    if (!sum) return;
    this.#experiments++;
    this.#observations.push({ counts, nanoseconds: sum.milliseconds * 1e6, noise: sum.noise });
    const begun = this.#stopwatch.now();
    const again = prepared(this.#alone, { layout, kernel, options });
    const milliseconds = this.#stopwatch.now() - begun;
    if (!again) return;
    again.dispose();
    const { step } = this.#stopwatch;
    if (milliseconds > 2 * step && milliseconds < mostPreparing)
      this.#observations.push({ counts: setup, nanoseconds: milliseconds * 1e6, noise: preparationNoise });
  }

  async checks(estimated: Estimate, until: number, progress: () => void): Promise<HardwareProfile["checks"]> {
    return timeChecks(this.#alone, estimated.prices, this.#inputs, this.#stopwatch, until, progress);
  }

  /** What handing work to other threads costs, where the engine has any. */
  async withTeam({ alike, shared }: Insides, estimated: Estimate, until: number): Promise<Estimate> {
    const makeEngine = (nanoseconds: Prices): Engine => alike({ ...this.#alone.profile, nanoseconds }, "all");
    this.#observations.push(...(await timeTeam(makeEngine, shared, estimated.prices, this.#inputs, this.#stopwatch, until)));
    return estimate(this.#observations, this.#known);
  }
}

const rounded = (value: number, digits: number): number => Number(value.toPrecision(digits));

function profileFrom(engine: Engine, { prices, spread, unobserved }: Estimate, checks: HardwareProfile["checks"], notes: string[]): HardwareProfile {
  const measured = operationNames.filter((name) => spread[name] < measuredShare * unobserved && prices[name] > 0);
  const { verdicts } = engine.profile;
  return {
    version: 2,
    host: hostName(),
    build: engine.build,
    threads: engine.threads,
    date: new Date().toISOString(),
    nanoseconds: Object.fromEntries(operationNames.map((name) => [name, rounded(prices[name], 4)])),
    spread: Object.fromEntries(measured.map((name) => [name, rounded(spread[name], 2)])),
    ...(checks ? { checks } : {}),
    ...(verdicts ? { verdicts } : {}),
    notes,
  };
}

/** As `measureProfile`, by another clock. */
export async function profileBy(clock: Clock, engine: Engine, given: MeasureProfileOptions = {}): Promise<HardwareProfile> {
  checkOptionNames("measureProfile", given, ["milliseconds", "signal", "onProgress"]);
  const { milliseconds: wanted = defaultMilliseconds } = given;
  const milliseconds = checkedNumber("measureProfile", "milliseconds", wanted, {
    what: `milliseconds, 1…${mostMilliseconds}`,
    least: 1,
    most: mostMilliseconds,
  });
  const { signal, onProgress } = checkedSignal("measureProfile", given);
  const insides = insidesOf("measureProfile", engine);
  const profile = engine.profile;
  signal?.throwIfAborted();
  const alone = insides.alike(profile, "one");
  try {
    const stopwatch = new Stopwatch(clock, signal);
    const begun = stopwatch.now();
    let told = 0;
    const progress = (): void => onProgress?.((told = Math.min(0.99, Math.max(told, (stopwatch.now() - begun) / milliseconds))));
    const measurement = new Measurement(alone, stopwatch);
    const candidates = await measurement.candidates(begun + lookingUp * milliseconds);
    progress();
    const team = engine.threads > 1;
    let found = await measurement.experiment(candidates, begun + (team ? experimentingAlone : experimenting) * milliseconds, progress);
    if (team) found = await measurement.withTeam(insides, found, begun + experimenting * milliseconds);
    const checks = await measurement.checks(found, begun + milliseconds, progress);
    onProgress?.(1);
    return profileFrom(engine, found, checks, measurement.notes);
  } finally {
    alone.dispose();
  }
}

/**
 * Measures what the engine's operations cost on this machine: give the profile to `createEngine`, and choices fit the hardware. A few dozen short
 * problems are timed, chosen one after the other as those that tell most about the prices that are least sure; what the time does not suffice for
 * keeps its proportion to the rest. Works in slices: a page stays alive.
 *
 * @param engine whose build and threads are measured; it may be used meanwhile, which disturbs the measurement
 * @throws ConvolutionError `unknown-value` (no engine), `unknown-option`, `invalid-number`; `disposed`, where the engine is meanwhile; `clock-unusable`, where
 * time stands still or runs backwards. Rejects with the signal's reason, and with what `onProgress` throws
 * @example
 * const profile = await measureProfile(engine, { milliseconds: 500 });
 * const fitted = await createEngine({ profile });
 */
export async function measureProfile(engine: Engine, options?: MeasureProfileOptions): Promise<HardwareProfile> {
  return profileBy(hostPacing(), engine, options);
}
