import { checkedLayout } from "../api/validate/request.js";
import { checkedBorder } from "../api/validate/border.js";
import { insidesOf } from "../api/engine.js";
import { checkedNumber, checkOptionNames } from "../kernels/options.js";
import { hostPacing } from "../runtime/pacing.js";
import type { Engine, Method } from "../types.js";
import type { Clock } from "./clock.js";
import { Contest, type Question } from "./contest.js";
import { crossingOf, type Ratio } from "./crossings.js";
import { hostName } from "./host.js";
import { Inputs } from "./inputs.js";
import { checkedSizes } from "./kernelSizes.js";
import { checkedFlag, checkedSignal } from "./signal.js";
import { Stopwatch } from "./stopwatch.js";
import type { Crossing, Crossover, MeasureCrossoverOptions } from "./types.js";

const defaultMilliseconds = 10_000;
const mostMilliseconds = 3_600_000;

/** Every so manieth size is looked at first, to see about where lines cross. */
const coarseStride = 4;
/** Rounds of one look. A size near a crossing is looked at again until its time is decided, or so often. */
const firstRounds = 3;
const moreRounds = 6;
const mostRounds = 39;
/** Where time is left, every size gets so many. */
const goodRounds = 9;

const optionNames = ["width", "height", "channels", "sample", "sizes", "border", "separable", "milliseconds", "signal", "onProgress"];

interface Checked extends Question {
  sizes: number[];
  milliseconds: number;
}

function checkedOptions(given: MeasureCrossoverOptions): Checked {
  checkOptionNames("measureCrossover", given, optionNames);
  const { width, height, channels, sample, sizes, border = "replicate", separable = true, milliseconds } = given;
  const layout = checkedLayout("measureCrossover", {
    width,
    height,
    ...(channels === undefined ? {} : { channels }),
    ...(sample === undefined ? {} : { sample }),
  });
  // Copies: what the caller does with the options while it is measured changes nothing.
  const { rows, columns } = checkedBorder(border, { where: "measureCrossover", channels: layout.channels, sample: layout.sample });
  return {
    layout,
    border: rows === columns ? rows : { rows, columns },
    separable: checkedFlag("measureCrossover", "separable", separable),
    sizes: checkedSizes(sizes),
    milliseconds:
      milliseconds === undefined
        ? defaultMilliseconds
        : checkedNumber("measureCrossover", "milliseconds", milliseconds, { what: `milliseconds, 1…${mostMilliseconds}`, least: 1, most: mostMilliseconds }),
  };
}

/** One search for crossings on its way. */
class Search {
  readonly #engine: Engine;
  readonly #question: Checked;
  readonly #stopwatch: Stopwatch;
  readonly #inputs = new Inputs();
  readonly #contests = new Map<number, Contest>();
  /** Sizes that would take too long. */
  readonly #slow = new Set<number>();
  readonly #end: number;

  constructor(engine: Engine, question: Checked, stopwatch: Stopwatch) {
    this.#engine = engine;
    this.#question = question;
    this.#stopwatch = stopwatch;
    this.#end = stopwatch.now() + question.milliseconds;
  }

  /** Sizes that are next to be looked at, the most pressing first; none where all is decided. */
  *#pressing(): Generator<number> {
    const { sizes } = this.#question;
    const open = sizes.filter((size) => !this.#contests.has(size) && !this.#slow.has(size));
    const coarse = open.filter((size) => sizes.indexOf(size) % coarseStride === 0 || size === sizes.at(-1));
    if (coarse.length > 0) yield coarse[0]!;
    for (const { interval, size } of this.#roughCrossings()) {
      const between = open.filter((one) => one > interval[0] && one < interval[1]);
      if (between.length > 0) yield nearest(between, size);
      const undecided = sizes.filter((one) => one >= interval[0] && one <= interval[1] && (this.#contests.get(one)?.samples ?? mostRounds) < mostRounds);
      if (undecided.length > 0) yield undecided.reduce((a, b) => (this.#contests.get(b)!.samples < this.#contests.get(a)!.samples ? b : a));
    }
    yield* open;
    yield* this.#inOrder.filter(({ samples }) => samples < goodRounds).map(({ size }) => size);
  }

  /** Looks at sizes until the time is up or all is decided. */
  async run(progress: () => void): Promise<void> {
    for (let size = this.#next(); size !== undefined; size = this.#next()) {
      await this.#stopwatch.pause();
      const known = this.#contests.get(size);
      const contest = known ?? new Contest(this.#engine, this.#question, size);
      const rounds = known ? moreRounds : firstRounds;
      const remaining = this.#end - this.#stopwatch.now();
      if (contest.lookMilliseconds(rounds, this.#stopwatch) > remaining) {
        if (known) return;
        this.#slow.add(size);
        continue;
      }
      await contest.look(this.#engine, rounds, this.#inputs, this.#stopwatch);
      if (contest.methods.length > 0) this.#contests.set(size, contest);
      else this.#slow.add(size);
      progress();
    }
  }

  #next(): number | undefined {
    return this.#stopwatch.now() < this.#end ? this.#pressing().next().value : undefined;
  }

  get #inOrder(): Contest[] {
    return [...this.#contests.values()].toSorted((a, b) => a.size - b.size);
  }

  /** Every pair of methods that were timed, once in either order. */
  *#pairs(): Generator<[Method, Method]> {
    const methods = [...new Set(this.#inOrder.flatMap((contest) => contest.methods))];
    for (const from of methods) for (const to of methods) if (from !== to) yield [from, to];
  }

  #ratios(from: Method, to: Method): Ratio[] {
    return this.#inOrder.flatMap((contest) => {
      const ratio = contest.ratio(from, to);
      return ratio ? [{ size: contest.size, ...ratio }] : [];
    });
  }

  /** Where lines seem to cross, by medians alone where noise leaves it open. */
  #roughCrossings(): Pick<Crossing, "size" | "interval">[] {
    return [...this.#pairs()].flatMap(([from, to]) => {
      const ratios = this.#ratios(from, to);
      const crossing =
        crossingOf(from, to, ratios) ??
        crossingOf(
          from,
          to,
          ratios.map(({ size, middle }) => ({ size, middle, low: middle, high: middle })),
        );
      return crossing ? [crossing] : [];
    });
  }

  crossings(): Crossing[] {
    const fastest = new Map(this.#inOrder.map((contest) => [contest.size, contest.row().fastest]));
    const found = [...this.#pairs()].flatMap(([from, to]) => {
      const crossing = crossingOf(from, to, this.#ratios(from, to));
      if (!crossing) return [];
      const [low, high] = crossing.interval;
      return [{ ...crossing, leading: fastest.get(low) === from && fastest.get(high) === to }];
    });
    return found.toSorted((a, b) => a.size - b.size);
  }

  result(): Crossover {
    const { layout, border, separable } = this.#question;
    const rows = this.#inOrder.map((contest) => contest.row());
    const crossings = this.crossings();
    const { host, notes } = this.#engine.profile;
    return {
      layout: { ...layout },
      border: structuredClone(border),
      separable,
      rows,
      crossings,
      notes: [...this.#notes(rows, crossings), ...(notes ?? []).filter((note) => note.includes("estimate"))],
      host: hostName(),
      build: this.#engine.build,
      threads: this.#engine.threads,
      profile: host,
      date: new Date().toISOString(),
    };
  }

  #notes(rows: Crossover["rows"], crossings: readonly Crossing[]): string[] {
    const { step } = this.#stopwatch;
    const slow = [...this.#slow].toSorted((a, b) => a - b);
    const [first, last] = [rows[0], rows.at(-1)];
    const leaders = [...new Set(rows.map(({ fastest }) => fastest))];
    const absent = [...new Set(this.#inOrder.flatMap((contest) => contest.absent))];
    return [
      ...(first && last && crossings.length === 0 ? [noCrossing(first.size, last.size, leaders)] : []),
      ...undecided(rows, crossings),
      ...(step >= 0.5 ? [`The clock has a step of ${Number(step.toPrecision(2))} ms: samples are longer, and fewer.`] : []),
      ...(slow.length > 0 ? [`Not measured for want of time or memory: ${slow.map((size) => `${size}×${size}`).join(", ")}.`] : []),
      ...(absent.length > 0 ? [`Not timed at some sizes for want of memory beside the others: ${absent.join(", ")}.`] : []),
    ];
  }
}

const noCrossing = (first: number, last: number, leaders: readonly Method[]): string =>
  leaders.length === 1
    ? `No method overtakes another between ${first}×${first} and ${last}×${last} taps: ${leaders[0]} is the fastest throughout.`
    : `No crossing between ${first}×${first} and ${last}×${last} taps is certain: where ${leaders.join(" and ")} change places, they are nearer than the noise.`;

/** Changes of the fastest method that no crossing tells of: noise or want of time left them open. */
function undecided(rows: Crossover["rows"], crossings: readonly Crossing[]): string[] {
  const [last, known] = [rows.at(-1), crossings.findLast(({ leading }) => leading)];
  if (!last || !known || last.fastest === known.to) return [];
  return [`At ${last.size}×${last.size} taps ${last.fastest} is the fastest; where it overtakes ${known.to} was not found in the time given.`];
}

const nearest = (sizes: readonly number[], aim: number): number =>
  sizes.reduce((best, size) => (Math.abs(Math.log(size / aim)) < Math.abs(Math.log(best / aim)) ? size : best));

/** As `measureCrossover`, by another clock. */
export async function crossoverBy(clock: Clock, engine: Engine, given: MeasureCrossoverOptions): Promise<Crossover> {
  const question = checkedOptions(given);
  const { signal, onProgress } = checkedSignal("measureCrossover", given);
  signal?.throwIfAborted();
  const stopwatch = new Stopwatch(clock, signal);
  const begun = stopwatch.now();
  const search = new Search(engine, question, stopwatch);
  let told = 0;
  await search.run(() => onProgress?.((told = Math.min(0.99, Math.max(told, (stopwatch.now() - begun) / question.milliseconds))), search.result()));
  const found = search.result();
  onProgress?.(1, structuredClone(found));
  return found;
}

/**
 * Measures which method is fastest at which kernel size, for images of one layout: at what size does the FFT win *here*? Each method that applies
 * is timed, in turns; time is spent where lines cross. Works in slices: a page stays alive.
 *
 * @param options `width` and `height` of the images in samples; `sizes` in taps a side
 * @returns rows by size; crossings, each with an interval: at its ends noise no longer explains who is ahead. None where no method overtakes
 * another in the range, which `notes` say
 * @throws ConvolutionError `unknown-value` (no engine), `unknown-option`, `invalid-raster`, `invalid-number`, …; `memory-limit`; `disposed`, where the engine is meanwhile;
 * `clock-unusable`. Rejects with the signal's reason, and with what `onProgress` throws
 * @example
 * const { crossings } = await measureCrossover(engine, { width: 320, height: 240, milliseconds: 500 });
 */
export async function measureCrossover(engine: Engine, options: MeasureCrossoverOptions): Promise<Crossover> {
  insidesOf("measureCrossover", engine);
  return crossoverBy(hostPacing(), engine, options);
}
