import { ConvolutionError } from "../errors.js";
import { fillWithNoise } from "../math/noise.js";
import { sampleFacts } from "../planning/samples.js";
import type { Candidate, Filter, Method, Raster, SampleType, Verdict } from "../types.js";

/** Those that are predicted to take at most so many times as long as the best take part, and at most so many of them. */
const promising = 2.5;
const mostCandidates = 3;

/**
 * Trials go on for so long, or until each has had so many turns; a single run of each may take longer than that, up to the most: by prediction all of
 * them together, and by the clock the first run, which shows where the machine is slower than predictions say.
 */
const enoughMilliseconds = 200;
const enoughTurns = 9;
const mostMilliseconds = 1000;

const arrays = { u8: Uint8Array, u16: Uint16Array, f32: Float32Array } as const;

/** What a trial needs to know of the problem. */
export interface TrialShape {
  width: number;
  height: number;
  channels: 1 | 2 | 3 | 4;
  sample: SampleType;
}

/** A larger image is not made: filling it would take longer than the trial. A small region of one is a small problem. */
const mostImageBytes = 268435456;

const imageBytes = ({ width, height, channels, sample }: TrialShape): number => width * height * channels * arrays[sample].BYTES_PER_ELEMENT;

function noiseImage({ width, height, channels, sample }: TrialShape): Raster {
  const data = new arrays[sample](width * height * channels);
  fillWithNoise(data, sampleFacts[sample].full);
  return { data, width, height, channels };
}

/** What runs read and write; nothing where the host gives no memory for it. */
function materialsFor(filter: Filter, shape: TrialShape): { image: Raster; target: Raster } | undefined {
  try {
    const image = noiseImage(shape);
    return { image, target: filter.run(image) };
  } catch (error) {
    if (error instanceof RangeError || (error instanceof ConvolutionError && error.fault === "capacity")) return undefined;
    throw error;
  }
}

/** A turn lasts at least so long, several runs where one is shorter: browsers' clocks are coarse. */
const turnMilliseconds = 3;
/** Times nearer than this are level: then predictions decide. */
const level = 0.03;

/** The candidates that are worth timing, the most promising first. One alone needs no trial. */
function contestantsAmong(candidates: readonly Candidate[]): Candidate[] {
  const open = candidates.filter(({ refused }) => refused === undefined).toSorted((a, b) => a.milliseconds! - b.milliseconds!);
  const best = open[0]?.milliseconds ?? 0;
  const near = open.filter(({ milliseconds }) => milliseconds! <= promising * best).slice(0, mostCandidates);
  let sum = 0;
  return near.filter(({ milliseconds }) => (sum += milliseconds!) <= mostMilliseconds);
}

/** One that runs, with its times. */
interface Contestant {
  method: Method;
  filter: Filter;
  /** Runs of a turn. */
  often: number;
  milliseconds: number[];
}

/** The lower quartile of its times: what disturbs a run makes it longer and never shorter. */
const typical = ({ milliseconds }: Contestant): number => milliseconds.toSorted((a, b) => a - b)[(milliseconds.length - 1) >> 2]!;

/**
 * Times the most promising candidates in turns on noise of the layout, in bounded time and memory.
 *
 * @param predicted what the method would be without a trial: it stays where others are level with it
 * @param prepare makes the filter of a method; nothing where the memory does not suffice beside the others
 * @returns the fastest, and milliseconds of each (lower quartiles); nothing where fewer than two could be timed as they would be alone
 */
export function tryOut(
  candidates: readonly Candidate[],
  predicted: Method,
  shape: TrialShape,
  prepare: (method: Method) => Filter | undefined,
  now: () => number,
): Pick<Verdict, "method" | "milliseconds"> | undefined {
  const promisingOnes = contestantsAmong(candidates);
  if (promisingOnes.length < 2 || imageBytes(shape) > mostImageBytes) return undefined;
  const contestants: Contestant[] = [];
  try {
    for (const { method, milliseconds, bytes } of promisingOnes) {
      const filter = prepare(method);
      if (!filter) continue;
      // Beside the others it has less memory than alone, and perhaps smaller tiles: its times would be another filter's.
      if (filter.explanation.bytes !== bytes) filter.dispose();
      else contestants.push({ method, filter, often: Math.ceil(turnMilliseconds / Math.max(milliseconds!, 0.001)), milliseconds: [] });
    }
    const begun = now();
    const materials = contestants.length < 2 ? undefined : materialsFor(contestants[0]!.filter, shape);
    if (!materials) return undefined;
    const { image, target } = materials;
    if (now() - begun > mostMilliseconds) return undefined;
    for (const one of contestants) one.often = runsOfTurn(one, () => one.filter.run(image, target), now);
    takeTurns(contestants, image, target, now);
  } finally {
    for (const { filter } of contestants) filter.dispose();
  }
  return verdictOf(
    contestants.filter(({ milliseconds }) => milliseconds.length > 0),
    predicted,
  );
}

/** As many runs as predictions say that a turn takes; fewer where the clock shows that so many take longer, as predictions may be of another machine. */
function runsOfTurn({ often }: Contestant, run: () => void, now: () => number): number {
  for (let fewer = 1; fewer < often; fewer *= 2) {
    const before = now();
    for (let turn = 0; turn < fewer; turn++) run();
    if (now() - before >= turnMilliseconds) return fewer;
  }
  return often;
}

function takeTurns(contestants: readonly Contestant[], image: Raster, target: Raster, now: () => number): void {
  const begun = now();
  for (let turn = 0; turn < enoughTurns; turn++) {
    for (const { filter, often, milliseconds } of contestants) {
      const before = now();
      for (let run = 0; run < often; run++) filter.run(image, target);
      const elapsed = now() - before;
      if (elapsed > 0) milliseconds.push(elapsed / often);
    }
    if (now() - begun > enoughMilliseconds) return;
  }
}

function verdictOf(timed: readonly Contestant[], predicted: Method): Pick<Verdict, "method" | "milliseconds"> | undefined {
  if (timed.length < 2) return undefined;
  const fastest = timed.reduce((best, one) => (typical(one) < typical(best) ? one : best));
  const expected = timed.find(({ method }) => method === predicted);
  const winner = expected && typical(expected) <= (1 + level) * typical(fastest) ? expected : fastest;
  return { method: winner.method, milliseconds: Object.fromEntries(timed.map((one) => [one.method, Number(typical(one).toPrecision(4))])) };
}
