import type { Engine, Filter, Kernel, Method, Raster, ResultRaster } from "../../src/index.js";
import { shuffled } from "../inputs.js";
import { spreadOf } from "../spread.js";
import { hasLost, lostAt, timesOf, type MethodTook, type Took } from "./statistics.js";
import type { HeldOut } from "./problems.js";

/** Where things are timed: in this process or in a page. */
export interface Bench {
  engine: Engine;
  /** Milliseconds. */
  clock: () => number;
}

/** How many turns methods get: as many as last so long, between these limits. */
export interface Effort {
  milliseconds: number;
  turns: [least: number, most: number];
}

export const firstEffort: Effort = { milliseconds: 350, turns: [3, 15] };
/** For what has to be timed again before it counts. */
export const secondEffort: Effort = { milliseconds: 1200, turns: [7, 31] };

/** Batches are far longer than the clock's step. */
export const shortestMilliseconds = 1;
const warmMilliseconds = 20;
const warmRuns = 4;
/** A first run may take several times as long as others, as the host gives memory page by page: even long ones are repeated before they count. */
const coldRuns = 2;
/** First runs meet cold caches and code that is only just being compiled for good: none is stopped before this. */
const patience = 100;

/** A method that takes part, prepared. */
interface Entrant {
  method: Method;
  filter: Filter;
  /** Runs of one turn. */
  batch: number;
  fastest: number;
  times: number[];
}

const tooSlow = new Error("past its time");

/** What all methods read and write: arrays that the host has given memory to before anything is timed. */
interface Rasters {
  image: Raster;
  target: ResultRaster;
}

/** Milliseconds of a first run in slices, so that a method that has lost can be stopped in its midst; nothing where it was. */
async function firstRun(clock: Bench["clock"], filter: Filter, { image, target }: Rasters, most: number): Promise<number | undefined> {
  const begun = clock();
  const stopWhereLost = (done: number): void => {
    if (done < 1 && clock() - begun > most) throw tooSlow;
  };
  try {
    await filter.runAsync(image, { target, onProgress: stopWhereLost });
    return clock() - begun;
  } catch (error) {
    if (error === tooSlow) return undefined;
    throw error;
  }
}

/** The first run; a second one where what the host compiled meanwhile may have been all that was slow. */
async function enter(clock: Bench["clock"], method: Method, filter: Filter, rasters: Rasters, best: number): Promise<Entrant | number> {
  const most = Math.max(patience, lostAt * best);
  const time = (await firstRun(clock, filter, rasters, most)) ?? (most === patience ? await firstRun(clock, filter, rasters, most) : undefined);
  if (time !== undefined) return { method, filter, batch: 1, fastest: time, times: [] };
  filter.dispose();
  return most;
}

/** Milliseconds of one run, from a batch of them. */
function timeBatch(clock: Bench["clock"], { filter, batch }: Entrant, { image, target }: Rasters): number {
  const begun = clock();
  for (let run = 0; run < batch; run += 1) filter.run(image, target);
  return (clock() - begun) / batch;
}

function warm(clock: Bench["clock"], entrant: Entrant, rasters: Rasters): void {
  const isCold = (run: number): boolean => run < (entrant.fastest < patience ? warmRuns : coldRuns);
  for (let spent = entrant.fastest, run = 0; isCold(run) || spent < warmMilliseconds; run += 1) {
    const time = timeBatch(clock, entrant, rasters);
    spent += time * entrant.batch;
    if (time > 0) entrant.fastest = Math.min(entrant.fastest, time);
    entrant.batch = Math.max(1, Math.min(4 * entrant.batch, Math.ceil(shortestMilliseconds / Math.max(1e-6, entrant.fastest))));
  }
}

/** Begins methods one after the other, the ones that should be fast first: those that are still in, and those that were stopped. */
async function enterAll(
  { engine, clock }: Bench,
  { layout, options }: HeldOut,
  kernel: Kernel,
  image: Raster,
  methods: readonly Method[],
): Promise<{ entrants: Entrant[]; stopped: MethodTook[]; rasters: Rasters }> {
  const entrants: Entrant[] = [];
  const stopped: MethodTook[] = [];
  let rasters: Rasters | undefined;
  for (const method of methods) {
    const filter = engine.prepare(kernel, layout, { ...options, method });
    rasters ??= { image, target: filter.run(image) };
    const entered = await enter(clock, method, filter, rasters, bestOfEntrants(entrants));
    if (typeof entered === "number") stopped.push({ method, atLeast: rounded(entered) });
    else entrants.push(entered);
  }
  return { entrants, stopped, rasters: rasters! };
}

const bestOfEntrants = (entrants: readonly Entrant[]): number => Math.min(...entrants.map(({ fastest }) => fastest));

/**
 * Times methods in turns, in another order each time. One that is past three times the best is stopped.
 *
 * @param methods in the order in which they are begun: the ones that should be fast first
 */
export async function timeMethods(
  bench: Bench,
  problem: HeldOut,
  kernel: Kernel,
  image: Raster,
  methods: readonly Method[],
  effort: Effort,
): Promise<MethodTook[]> {
  const { clock } = bench;
  const { entrants, stopped, rasters } = await enterAll(bench, problem, kernel, image, methods);
  const left = (): Entrant[] => entrants.filter(({ fastest }) => !hasLost(fastest, bestOfEntrants(entrants)));
  for (const entrant of entrants) warm(clock, entrant, rasters);
  const turns = turnsFor(effort, left());
  for (let turn = 0; turn < turns; turn += 1) {
    for (const entrant of shuffled(left(), problem.index * 64 + turn)) {
      const time = timeBatch(clock, entrant, rasters);
      entrant.times.push(time);
      entrant.fastest = Math.min(entrant.fastest, time);
    }
  }
  const kept = left();
  for (const { filter } of entrants) filter.dispose();
  return [...entrants.map((entrant) => took(entrant.method, entrant, kept.includes(entrant))), ...stopped];
}

/** As many turns as last for the effort's time. */
export function turnsFor({ milliseconds, turns: [least, most] }: Effort, all: readonly { batch: number; fastest: number }[]): number {
  const turn = all.reduce((sum, { batch, fastest }) => sum + batch * fastest, 0);
  return Math.min(most, Math.max(least, Math.round(milliseconds / turn)));
}

/** What is told of one that took part, to the end or not. */
export const took = <M extends string>(method: M, { times, fastest }: { times: number[]; fastest: number }, toTheEnd: boolean): { method: M } & Took =>
  toTheEnd ? { method, milliseconds: timesOf(spreadOf(times)) } : { method, atLeast: rounded(fastest) };

export const rounded = (milliseconds: number): number => Number(milliseconds.toPrecision(4));
