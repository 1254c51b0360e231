import { unlessShort } from "../errors.js";
import type { Kernel } from "../kernels/index.js";
import type { Border, Engine, Explanation, Filter, Layout, Method, PrepareOptions, Raster } from "../types.js";
import type { Inputs } from "./inputs.js";
import type { ByMethod, CrossoverRow } from "./types.js";
import type { Stopwatch } from "./stopwatch.js";
import { kernelOfSize } from "./kernelSizes.js";

/** A method whose times are all past this many times that of the fastest is not timed further: it is not where lines cross. */
const hopeless = 3;
/** One time tells nothing: the host may have been busy elsewhere. */
const leastTimes = 2;
/** A method that is predicted to take so many times as long is not even begun: predictions are not as wrong as that. */
const farBeyond = 12;
/** A method is warm after so long, or so many runs. */
const warmMilliseconds = 8;
const mostWarmRuns = 200;

/** A run that lasts longer is made in slices, so that a page stays alive. */
const longMilliseconds = 50;

/** Fewer pairs of times decide nothing. */
const leastPairs = 5;

/** A method's times at one size. */
interface Contender {
  method: Method;
  milliseconds: number[];
  /** Of one run, roughly. */
  expected: number;
  /** Not timed any more: hopeless, far slower by prediction, or too large for the memory. */
  dropped: boolean;
  /** Far slower than the fastest, beyond doubt. */
  hopeless: boolean;
  /** There was no memory for it beside the others. */
  absent: boolean;
}

/** What is compared. */
export interface Question {
  layout: Required<Layout>;
  border: Border;
  separable: boolean;
}

const quantile = (sorted: readonly number[], part: number): number => {
  const place = part * (sorted.length - 1);
  const below = Math.floor(place);
  return sorted[below]! + (place - below) * (sorted[Math.min(below + 1, sorted.length - 1)]! - sorted[below]!);
};

/** A prepared contender, for one look. */
interface Ready {
  contender: Contender;
  run: () => Raster;
  runAsync: () => Promise<Raster>;
  dispose: () => void;
}

/** One kernel size: its methods, timed in turns, in one look or several. */
export class Contest {
  readonly size: number;
  readonly #kernel: Kernel;
  readonly #question: Question;
  readonly #options: PrepareOptions;
  readonly #explanation: Explanation;
  readonly #contenders: Contender[];
  readonly #inSlices: boolean;

  /** @throws ConvolutionError `memory-limit` where no method fits */
  constructor(engine: Engine, question: Question, size: number) {
    const { layout, border, separable } = question;
    const { channels } = layout;
    this.size = size;
    this.#question = question;
    this.#kernel = kernelOfSize(size, separable);
    this.#options = channels === 2 || channels === 4 ? { border, alpha: "none" } : { border };
    this.#explanation = engine.explain(this.#kernel, layout, this.#options);
    const open = this.#explanation.candidates.filter(({ refused }) => refused === undefined);
    const best = Math.min(...open.map(({ milliseconds }) => milliseconds!));
    this.#inSlices = best > longMilliseconds || engine.threads > 1;
    this.#contenders = open.map(({ method, milliseconds }) => ({
      method,
      milliseconds: [],
      expected: milliseconds!,
      dropped: milliseconds! > farBeyond * best && method !== this.#explanation.method,
      hopeless: false,
      absent: false,
    }));
  }

  get samples(): number {
    return Math.max(0, ...this.#contenders.map(({ milliseconds }) => milliseconds.length));
  }

  /** Methods that have been timed. */
  get methods(): Method[] {
    return this.#timed.map(({ method }) => method);
  }

  /** Methods that could not be timed for want of memory. */
  get absent(): Method[] {
    return this.#contenders.filter(({ absent }) => absent).map(({ method }) => method);
  }

  get #timed(): Contender[] {
    return this.#contenders.filter(({ milliseconds }) => milliseconds.length > 0);
  }

  /** Where memory is short, it is the others for which there is none: regret is that of the method which the engine would choose. */
  get #chosenFirst(): Contender[] {
    const place = ({ method }: Contender): number => (method === this.#explanation.method ? 0 : 1);
    return this.#contenders.toSorted((a, b) => place(a) - place(b));
  }

  /** About how long a look takes. */
  lookMilliseconds(rounds: number, stopwatch: Stopwatch): number {
    const open = this.#contenders.filter(({ dropped }) => !dropped);
    return open.reduce((sum, { expected }) => sum + expected + rounds * stopwatch.sampleMilliseconds(expected), 0);
  }

  /** Times all methods in turns, so many times each, after a run that is not counted. */
  async look(engine: Engine, rounds: number, inputs: Inputs, stopwatch: Stopwatch): Promise<void> {
    const ready: Ready[] = [];
    try {
      for (const contender of this.#chosenFirst) {
        if (contender.dropped) continue;
        await stopwatch.pause();
        const one = this.#prepared(engine, contender, inputs);
        if (one) ready.push(one);
        else contender.dropped = contender.absent = true;
      }
      for (const one of ready) await this.#warm(one, stopwatch);
      for (let round = 0; round < rounds; round++) await this.#round(ready, stopwatch);
    } finally {
      for (const { dispose } of ready) dispose();
    }
  }

  /** Runs that are not counted: longer for a method that was never timed at this size, as the first ones find code and memory cold. */
  async #warm({ contender, run, runAsync }: Ready, stopwatch: Stopwatch): Promise<void> {
    await stopwatch.pause();
    if (this.#inSlices) return void (await runAsync());
    const fresh = contender.milliseconds.length === 0;
    const often = Math.min(mostWarmRuns, Math.ceil((fresh ? warmMilliseconds : 1) / Math.max(contender.expected, 1e-3)));
    const begun = stopwatch.now();
    let [turns, passed] = [0, 0];
    while (turns < often && passed <= warmMilliseconds) {
      run();
      turns++;
      passed = stopwatch.now() - begun;
    }
    // Predictions may be of another machine.
    if (fresh) contender.expected = Math.max(contender.expected, (passed - stopwatch.step) / turns);
  }

  async #round(ready: readonly Ready[], stopwatch: Stopwatch): Promise<void> {
    for (const { contender, run, runAsync } of ready) {
      if (contender.dropped) continue;
      await stopwatch.pause();
      const sample = this.#inSlices ? await stopwatch.sampleAsync(runAsync, contender.expected) : stopwatch.sample(run, contender.expected);
      if (sample === undefined) continue;
      contender.expected = sample.milliseconds;
      contender.milliseconds.push(sample.milliseconds);
    }
    this.#dropHopeless();
  }

  /** Nothing where the engine's memory does not suffice for it beside the others. */
  #prepared(engine: Engine, contender: Contender, inputs: Inputs): Ready | undefined {
    const { layout } = this.#question;
    return unlessShort(() => {
      const [image, target] = [inputs.source(layout), inputs.target(layout, layout.sample)];
      const filter: Filter = engine.prepare(this.#kernel, layout, { ...this.#options, method: contender.method });
      return { contender, run: () => filter.run(image, target), runAsync: () => filter.runAsync(image, { target }), dispose: () => filter.dispose() };
    });
  }

  #dropHopeless(): void {
    const best = Math.min(...this.#timed.map(medianOf));
    for (const contender of this.#timed) {
      const { milliseconds } = contender;
      contender.hopeless ||= milliseconds.length >= leastTimes && Math.min(...milliseconds) > hopeless * best;
      contender.dropped ||= contender.hopeless;
    }
  }

  /**
   * The logarithm of one method's time over another's, round by round: its median, and bounds that hold it with 94 % or more (order statistics: how many
   * of the ratios lie below their median is a binomial count, so no distribution is assumed).
   *
   * Source    for instance David & Nagaraja, Order Statistics, 3rd ed., 2003, §7.1
   */
  ratio(from: Method, to: Method): { middle: number; low: number; high: number } | undefined {
    const [a, b] = [from, to].map((method) => this.#contenders.find((contender) => contender.method === method));
    if (!a || !b || a.milliseconds.length === 0 || b.milliseconds.length === 0) return undefined;
    const pairs = Math.min(a.milliseconds.length, b.milliseconds.length);
    const ratios = Array.from({ length: pairs }, (_, round) => Math.log(a.milliseconds[round]! / b.milliseconds[round]!)).toSorted((x, y) => x - y);
    const middle = quantile(ratios, 0.5);
    if (a.hopeless || b.hopeless) return { middle, low: middle, high: middle };
    if (pairs < leastPairs) return { middle, low: -Infinity, high: Infinity };
    const outside = Math.max(0, Math.ceil(pairs / 2 - Math.sqrt(pairs)) - 1);
    return { middle, low: ratios[outside]!, high: ratios.at(-1 - outside)! };
  }

  row(): CrossoverRow {
    const timed = this.#timed;
    const fastest = timed.reduce((best, one) => (medianOf(one) < medianOf(best) ? one : best));
    const { method: chosen, candidates } = this.#explanation;
    const predictions = candidates.filter(({ refused }) => refused === undefined).map(({ method, milliseconds }) => [method, digits(milliseconds!)] as const);
    return {
      size: this.size,
      milliseconds: byMethod(timed, medianOf),
      quartiles: Object.fromEntries(timed.map(({ method, milliseconds }) => [method, quartilesOf(milliseconds)])),
      samples: this.samples,
      predicted: Object.fromEntries(predictions) as ByMethod<number>,
      chosen,
      fastest: fastest.method,
      regret: this.#regret(chosen, fastest, timed),
    };
  }

  /** What the choice costs beyond the fastest; nothing where noise could be the reason. */
  #regret(chosen: Method, fastest: Contender, timed: readonly Contender[]): number {
    const own = timed.find(({ method }) => method === chosen);
    if (!own || own === fastest) return 0;
    const bounds = this.ratio(chosen, fastest.method);
    return bounds && bounds.low <= 0 && bounds.high >= 0 ? 0 : digits(medianOf(own) / medianOf(fastest) - 1);
  }
}

const digits = (value: number): number => Number(value.toPrecision(4));

function medianOf({ milliseconds }: Contender): number {
  return quantile(
    milliseconds.toSorted((a, b) => a - b),
    0.5,
  );
}

function quartilesOf(milliseconds: readonly number[]): [number, number] {
  const sorted = milliseconds.toSorted((a, b) => a - b);
  return [digits(quantile(sorted, 0.25)), digits(quantile(sorted, 0.75))];
}

const byMethod = (timed: readonly Contender[], value: (one: Contender) => number): ByMethod<number> =>
  Object.fromEntries(timed.map((one) => [one.method, digits(value(one))]));
