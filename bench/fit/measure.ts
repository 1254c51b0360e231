import type { Engine, Filter, Kernel, Method, Raster, ResultRaster } from "../../src/index.js";
import type { Work } from "../../src/planning/method.js";
import { planesOf } from "../inputs.js";
import { processorMilliseconds } from "../processorTime.js";
import { spreadOf } from "../spread.js";
import type { Question } from "./problems.js";
import { worksOf } from "./works.js";

/** One method on one question. */
export interface Timed {
  question: string;
  method: Method;
  work: Work;
  /** Nanoseconds of a run, one for each turn. */
  runs: number[];
  /** Nanoseconds of preparing a kernel that is new to the engine. */
  setups: number[];
}

/** Methods that would do more than this many multiply–adds are left out: they are far from being chosen, and slow to time. */
export const mostMultiplyAdds = { "simd": 300_000_000, "relaxed-simd": 300_000_000, "scalar": 80_000_000 };

const turnsPerPass = 9;
const setupsPerPass = 4;
/** Far above the clock's step, a microsecond. */
const shortestNanoseconds = 1_000_000;
const warmNanoseconds = 12_000_000;

/** A method that takes part, prepared. */
interface Entrant {
  timed: Timed;
  filter: Filter;
  target: ResultRaster;
  /** Runs of one turn: as many as last a millisecond. */
  batch: number;
}

/** Times all methods of one question in turns and adds the times to what earlier passes found. */
export function timeQuestion(engine: Engine, question: Question, known: Map<string, Timed>): void {
  const image = planesOf(question.layout, 1)[0]!;
  const kernel = question.makeKernel();
  const entrants: Entrant[] = [];
  for (const { method, work } of worksOf(question, kernel, engine.build)) {
    const { directTap = 0, rowTap = 0, columnTap = 0, pairTap = 0, wordTap = 0, pairRowTap = 0 } = work.run;
    if (directTap + rowTap + columnTap + pairTap + wordTap + pairRowTap > mostMultiplyAdds[engine.build]) continue;
    const key = `${question.name}, ${method}`;
    const timed = known.get(key) ?? { question: question.name, method, work, runs: [], setups: [] };
    known.set(key, timed);
    entrants.push(enter(engine, question, kernel, image, timed));
  }
  for (let turn = 0; turn < turnsPerPass; turn += 1) {
    for (const entrant of entrants) entrant.timed.runs.push(nanosecondsOf(entrant, image));
  }
  for (const { filter } of entrants) filter.dispose();
  for (let turn = 0; turn < setupsPerPass; turn += 1) {
    for (const { timed } of entrants) timed.setups.push(setupNanoseconds(engine, question, timed.method));
  }
}

function enter(engine: Engine, question: Question, kernel: Kernel, image: Raster, timed: Timed): Entrant {
  const filter = engine.prepare(kernel, question.layout, { ...question.options, method: timed.method });
  const entrant: Entrant = { timed, filter, target: filter.run(image), batch: 1 };
  let spent = 0;
  let fastest = Infinity;
  for (let run = 0; run < 3 || spent < warmNanoseconds; run += 1) {
    const nanoseconds = nanosecondsOf(entrant, image);
    spent += nanoseconds;
    if (nanoseconds > 0) fastest = Math.min(fastest, nanoseconds);
  }
  entrant.batch = Math.max(1, Math.ceil(shortestNanoseconds / fastest));
  return entrant;
}

/** Nanoseconds of one run, from a batch of them. */
function nanosecondsOf({ filter, target, batch }: Entrant, image: Raster): number {
  const begun = processorMilliseconds();
  for (let run = 0; run < batch; run += 1) filter.run(image, target);
  return ((processorMilliseconds() - begun) * 1e6) / batch;
}

function setupNanoseconds(engine: Engine, question: Question, method: Method): number {
  const kernel = question.makeKernel();
  const begun = processorMilliseconds();
  const filter = engine.prepare(kernel, question.layout, { ...question.options, method });
  const nanoseconds = (processorMilliseconds() - begun) * 1e6;
  filter.dispose();
  return nanoseconds;
}

export const medianRun = ({ runs }: Timed): number => spreadOf(runs).median;
export const medianSetup = ({ setups }: Timed): number => spreadOf(setups).median;
