import type { Candidate, Engine, Explanation, Filter, Layout, Method, Raster, ResultRaster } from "../../src/index.js";
import type { Job } from "./jobs.js";

/** What the clock said about one method. */
export interface Timing {
  method: Method;
  /** Median, shortest and longest of the runs, in milliseconds. */
  median: number;
  shortest: number;
  longest: number;
  runs: number;
  /** Set where only some rows were filtered, to keep the demo short: the times are for all rows, in proportion. */
  rowsMeasured?: number;
}

/** A job, done: what the engine said before, what it did, how long each method took. */
export interface Outcome {
  job: Job;
  layout: Required<Layout>;
  explanation: Explanation;
  /** Method by method as in `explanation.candidates`; refused ones have no timing. */
  methods: { candidate: Candidate; timing?: Timing }[];
  /** By the method that the engine chose. */
  result: ResultRaster;
  /** By every method that applies, for comparison; fewer rows where `rowsMeasured` says so. */
  results: { method: Method; errorBound: number; raster: ResultRaster }[];
}

/** One run may take as long as this; a slower method filters fewer rows. */
const longestRunMilliseconds = 2500;
/** Slower runs get no run to warm up first: `prepare` has warmed their routines, and a run is long beside what is left. */
const warmedMilliseconds = 800;
const fewestRuns = 3;
const mostRuns = 11;
/** A method that has used this up gets no more than the fewest runs. */
const spendMilliseconds = 700;

/** A method that takes part in the race. */
interface Entrant {
  candidate: Candidate;
  filter: Filter;
  rows: number;
  target: ResultRaster;
  times: number[];
}

/** Asks the engine, then runs every method that applies in turns, so that a busy moment of the machine hits all alike. */
export function perform(engine: Engine, job: Job, image: Raster, layout: Required<Layout>): Outcome {
  const explanation = engine.explain(job.kernel, layout, job.options);
  const chosen = engine.prepare(job.kernel, layout, job.options);
  const result = chosen.run(image);
  chosen.dispose();
  const applicable = explanation.candidates.filter((candidate) => candidate.refused === undefined);
  const entrants = applicable.map((candidate) => enter(engine, job, candidate, image, layout));
  race(entrants, image);
  for (const entrant of entrants) entrant.filter.dispose();
  return {
    job,
    layout,
    explanation,
    result,
    methods: explanation.candidates.map((candidate) => {
      const entrant = entrants.find((one) => one.candidate === candidate);
      return entrant === undefined ? { candidate } : { candidate, timing: timingOf(entrant, layout.height) };
    }),
    results: entrants.map((entrant) => ({ method: entrant.candidate.method, errorBound: entrant.filter.explanation.errorBound, raster: entrant.target })),
  };
}

/** Prepares a method for as many rows as it filters in the time of a run, and runs it once. */
function enter(
  engine: Engine,
  job: Job,
  candidate: Candidate,
  image: Raster,
  layout: Required<Layout>,
  expected: number = candidate.milliseconds ?? 0,
): Entrant {
  const rows = expected <= longestRunMilliseconds ? layout.height : Math.max(1, Math.floor((layout.height * longestRunMilliseconds) / (2 * expected)));
  const region = rows === layout.height ? {} : { region: { x: 0, y: 0, width: layout.width, height: rows } };
  const filter = engine.prepare(job.kernel, layout, { ...job.options, ...region, method: candidate.method });
  const begun = performance.now();
  const target = filter.run(image);
  const first = performance.now() - begun;
  const whole = (first * layout.height) / rows;
  if (first > 2 * longestRunMilliseconds && rows > 1 && whole > 2 * expected) {
    filter.dispose();
    return enter(engine, job, candidate, image, layout, whole);
  }
  return { candidate, filter, rows, target, times: first > warmedMilliseconds ? [first] : [] };
}

function race(entrants: readonly Entrant[], image: Raster): void {
  for (let round = 0; round < mostRuns; round += 1) {
    for (const entrant of entrants) {
      const spent = entrant.times.reduce((sum, time) => sum + time, 0);
      if (entrant.times.length >= fewestRuns && spent > spendMilliseconds) continue;
      const begun = performance.now();
      entrant.filter.run(image, entrant.target);
      entrant.times.push(performance.now() - begun);
    }
  }
}

function timingOf(entrant: Entrant, rows: number): Timing {
  const sorted = entrant.times.map((time) => (time * rows) / entrant.rows).toSorted((a, b) => a - b);
  const middle = sorted.length >> 1;
  return {
    method: entrant.candidate.method,
    median: sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2,
    shortest: sorted[0],
    longest: sorted[sorted.length - 1],
    runs: sorted.length,
    ...(entrant.rows === rows ? {} : { rowsMeasured: entrant.rows }),
  };
}

/** What the choice cost, in words: see `regretOf`. */
export function verdictOf(outcome: Outcome): string {
  const regret = regretOf(outcome);
  if (regret === 0) return "the fastest of those that apply";
  return regret < 0.01 ? "within 1 % of the fastest" : `${Math.round(100 * regret)} % slower than the fastest`;
}

/** Time of the chosen method over that of the fastest, less 1. */
export function regretOf(outcome: Outcome): number {
  const timings = outcome.methods.flatMap(({ timing }) => timing ?? []);
  const fastest = Math.min(...timings.map((timing) => timing.median));
  return (timings.find((timing) => timing.method === outcome.explanation.method)?.median ?? fastest) / fastest - 1;
}
