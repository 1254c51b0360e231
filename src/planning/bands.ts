import type { Program, RowSpan } from "../runtime/program.js";
import { mostTasks } from "../runtime/workers/board.js";
import { priceOf, type Counts, type Operation, type Prices } from "./cost.js";
import type { MethodPlan, Work } from "./method.js";
import { panelsOf } from "./panels.js";
import { cutAxis, type Problem } from "./problem.js";
import { sampleFacts } from "./samples.js";

/**
 * How a problem's results are divided among threads.
 *
 *     sweeps (direct, separable, running sums)    bands of rows, one a thread: regions, so no byte changes
 *     fft                                         one program with a lane a thread: the tiles are those of one thread, so no byte changes
 *
 * Where threads share the memory, rows of the source and results wait there, and whoever is free takes the next band or step. Where they
 * do not, bands are sent to memories of their own; transforms stay on one thread there.
 */
export interface Division {
  threads: number;
  /** Programs that take turns in one block of memory; a block a band, a single one where threads work together. */
  blocks: Problem[][];
  together: boolean;
  work: Work;
  /** Predicted time of one run. */
  nanoseconds: number;
}

/** A band has at least this many rows for each row of taps above the first, which it enters again. */
const rowsPerRepeatedRow = 2;

/** Rows of the source that the results read, from the first to the last: those that wait in shared memory. */
export function sourceRows({ vertical }: Problem): RowSpan {
  let first = Infinity;
  let last = -1;
  for (const row of vertical.map) {
    if (row >= 0 && row < first) first = row;
    if (row > last) last = row;
  }
  return last < 0 ? { first: 0, count: 0 } : { first, count: last - first + 1 };
}

const sourceRowBytes = ({ request }: Problem): number => (request.width * request.channels) << sampleFacts[request.sample].code;

const resultBytes = ({ horizontal, vertical, channels, request }: Problem): number =>
  (horizontal.count * vertical.count * channels) << sampleFacts[request.output.sample].code;

/** Blocks begin on cache lines, and behind the rows of a source are two lines that routines may read. */
const lineBytes = 64;
const slackBytes = 2 * lineBytes;

/** Bytes of the blocks that rows of the source and results wait in, for the threads that see neither array. */
export function waitingBytes(problem: Problem): { source: number; result: number } {
  const onLines = (bytes: number): number => lineBytes * Math.ceil(bytes / lineBytes);
  return { source: onLines(sourceRows(problem).count * sourceRowBytes(problem)) + slackBytes, result: onLines(resultBytes(problem)) };
}

function alone(plan: MethodPlan, problem: Problem, prices: Prices): Division {
  const { problems, work } = panelsOf(plan, problem);
  return { threads: 1, blocks: [problems], together: false, work, nanoseconds: priceOf(work.run, prices) };
}

/**
 * Bands from top to bottom. Cores are seldom equally fast at every moment: each thread begins with a band of three quarters of its share,
 * and whoever is done first takes of the rest, which is cut into one small band a thread. The last band is the calling thread's own. Where
 * small bands would enter mostly rows that others enter too, there are none.
 */
function bandHeights({ vertical }: Problem, threads: number): number[] {
  const share = vertical.count / threads;
  const even = (rows: number): number => 2 * Math.ceil(rows / 2);
  const small = even(share / 4);
  const smallOnes = small >= rowsPerRepeatedRow * 2 * (vertical.taps - 1) ? threads : 0;
  const large = even((vertical.count - smallOnes * small) / threads);
  const heights = [...Array<number>(threads - 1).fill(large), ...Array<number>(smallOnes).fill(small)];
  const rest = vertical.count - heights.reduce((sum, height) => sum + height, 0);
  return [...heights, rest];
}

function bandProblems(problem: Problem, heights: readonly number[], bytesAvailable: number): Problem[] {
  let start = 0;
  return heights.map((height) => {
    const vertical = cutAxis(problem.vertical, start, height);
    const band = { ...problem, whole: problem.whole ?? problem, row: start, vertical, bytesAvailable };
    start += height;
    return band;
  });
}

/** All counts of several works. */
function sumOf(works: readonly Counts[]): Counts {
  const sum: Counts = {};
  for (const work of works) for (const [name, count] of Object.entries(work) as [Operation, number][]) sum[name] = (sum[name] ?? 0) + count;
  return sum;
}

/** What one of several threads does of it. */
function shareOf(work: Counts, threads: number): Counts {
  return Object.fromEntries((Object.entries(work) as [Operation, number][]).map(([name, count]) => [name, count / threads]));
}

/** Handing over: a call for each of the other threads, and the bytes that they do not see otherwise. */
function handingOver(problem: Problem, threads: number, meetings: number): Counts {
  const { source, result } = waitingBytes(problem);
  return { handOver: threads - 1, handedByte: ((source + result) * (threads - 1)) / threads, meeting: meetings };
}

function inBands(plan: MethodPlan, problem: Problem, threads: number, prices: Prices): Division | undefined {
  const { vertical } = problem;
  if (vertical.count < threads * Math.max(4, rowsPerRepeatedRow * (vertical.taps - 1))) return undefined;
  const waiting = waitingBytes(problem);
  const heights = bandHeights(problem, threads);
  const bands = bandProblems(problem, heights, Math.floor((problem.bytesAvailable - waiting.source - waiting.result) / heights.length));
  if (bands.some((band) => plan.applicable(band) !== true)) return undefined;
  const panels = bands.map((band) => panelsOf(plan, band));
  const all = sumOf(panels.map(({ work }) => work.run));
  const run = sumOf([shareOf(all, threads), handingOver(problem, threads, 0)]);
  const bytes = panels.reduce((sum, { work }) => sum + work.bytes, waiting.source + waiting.result);
  const work = { setup: sumOf(panels.map(({ work: { setup } }) => setup)), run, bytes };
  return { threads, blocks: panels.map(({ problems }) => problems), together: false, work, nanoseconds: priceOf(run, prices) };
}

function workingTogether(plan: MethodPlan, problem: Problem, threads: number, prices: Prices): Division | undefined {
  if (!problem.crew.shared) return undefined;
  const panels = panelsOf(plan, problem);
  const problems = panels.problems.map((panel) => ({ ...panel, together: { threads, alone: panel } }));
  const works = problems.map((panel) => plan.work(panel));
  if (works.some(({ run }) => run.step! > mostTasks)) return undefined;
  const waiting = waitingBytes(problem);
  const meetings = panels.problems.reduce((sum, panel) => sum + plan.phases!(panel), 0);
  const run = sumOf([shareOf(panels.work.run, threads), handingOver(problem, threads, meetings)]);
  const most = works.reduce((most, { bytes }) => Math.max(most, bytes), 0);
  const bytes = most + waiting.source + waiting.result;
  return { threads, blocks: [problems], together: true, work: { ...panels.work, run, bytes }, nanoseconds: priceOf(run, prices) };
}

/** Thread counts that are considered: all, and half of them again and again. */
function* counts(threads: number): Generator<number> {
  for (let count = threads; count > 1; count = Math.floor(count / 2)) yield count;
}

const known = new WeakMap<Problem, Map<MethodPlan, Division>>();

/**
 * The division that is predicted to be fastest and fits; one thread where handing over would not pay.
 */
export function divisionOf(plan: MethodPlan, problem: Problem, prices: Prices): Division {
  const found = known.get(problem)?.get(plan);
  if (found) return found;
  let best = alone(plan, problem, prices);
  const divide = plan.phases ? workingTogether : inBands;
  for (const threads of counts(problem.crew.threads)) {
    const division = divide(plan, problem, threads, prices);
    if (division && division.work.bytes <= problem.bytesAvailable && division.nanoseconds < best.nanoseconds) best = division;
  }
  if (!known.has(problem)) known.set(problem, new Map());
  known.get(problem)!.set(plan, best);
  return best;
}

/** Programs of every block. */
export function programsOf(plan: MethodPlan, { blocks }: Division): Program[][] {
  return blocks.map((problems) => problems.map((problem) => plan.program(problem)));
}
