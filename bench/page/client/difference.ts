import type { Method } from "../../../src/index.js";
import type { Crossing, Crossover, CrossoverRow } from "../../../src/measure/index.js";
import { bySide, dateInWords, listed } from "../../../src/report/figures.js";
import { capitalised, methodOrder, nameAndVerb, nameInSentence } from "../../../src/report/methodNames.js";
import { described } from "./wanted.js";

/** A time and the middle half of what was measured around it. */
interface Timed {
  median: number;
  low: number;
  high: number;
}

function timedAt(row: CrossoverRow, method: Method): Timed | undefined {
  const median = row.milliseconds[method];
  if (median === undefined) return undefined;
  const [low, high] = row.quartiles[method] ?? [median, median];
  return { median, low, high };
}

/** Between two sizes that were measured, on the straight line between them in the chart, where both axes are logarithmic. */
function between(a: Timed, b: Timed, part: number): Timed {
  const mixed = (from: number, to: number): number => from ** (1 - part) * to ** part;
  return { median: mixed(a.median, b.median), low: mixed(a.low, b.low), high: mixed(a.high, b.high) };
}

/** A method's time at a size, within the range in which it was measured. */
function timeFor(rows: readonly CrossoverRow[], method: Method, size: number): Timed | undefined {
  const measured = rows.filter((row) => row.milliseconds[method] !== undefined);
  const above = measured.find((row) => row.size >= size);
  const below = measured.findLast((row) => row.size <= size);
  if (above === undefined || below === undefined) return undefined;
  const [high, low] = [timedAt(above, method)!, timedAt(below, method)!];
  return above === below ? high : between(low, high, Math.log(size / below.size) / Math.log(above.size / below.size));
}

/** How a method's times now stand to those of then. */
interface Factor {
  method: Method;
  /** Time then over time now, the median over the sizes. */
  faster: number;
  /** At half of the sizes at least, the middle halves of both measurements meet. */
  withinNoise: boolean;
}

const middle = (sorted: readonly number[]): number => sorted[sorted.length >> 1]!;

function factorOf(now: Crossover, then: Crossover, method: Method): Factor | undefined {
  const pairs = now.rows.flatMap((row) => {
    const [mine, other] = [timedAt(row, method), timeFor(then.rows, method, row.size)];
    return mine === undefined || other === undefined ? [] : [{ mine, other }];
  });
  if (pairs.length === 0) return undefined;
  const meeting = pairs.filter(({ mine, other }) => mine.low <= other.high && other.low <= mine.high);
  const ratios = pairs.map(({ mine, other }) => other.median / mine.median).sort((a, b) => a - b);
  return { method, faster: middle(ratios), withinNoise: 2 * meeting.length >= pairs.length };
}

/** Below this the difference is called small, noise or not. */
const smallFactor = 1.03;

function standing({ faster, withinNoise }: Factor): string {
  if (withinNoise || Math.max(faster, 1 / faster) < smallFactor) return "as fast";
  return faster > 1 ? `${factorInWords(faster)} times as fast` : `${factorInWords(1 / faster)} times as slow`;
}

const factorInWords = (factor: number): string => (factor < 10 ? factor.toFixed(factor < 1.995 ? 2 : 1) : factor.toFixed(0));

/** "The FFT is 1.9 times as fast, and direct sums as fast, as on …". Methods that fare alike are named together. */
function speedSentence(factors: readonly Factor[], then: string): string {
  const [first, ...others] = new Set(factors.map(standing));
  if (others.length === 0) {
    const [only] = factors;
    return `${factors.length > 1 ? "Every method is" : capitalised(nameAndVerb(only!.method))} ${first} as ${then}.`;
  }
  const parts = [first!, ...others].map((words) => {
    const alike = factors.filter((factor) => standing(factor) === words);
    return `${alike.length > 1 ? `${listed(alike.map(({ method }) => nameInSentence(method)))} are` : nameAndVerb(alike[0]!.method)} ${words}`;
  });
  return `${capitalised(listed(parts))} as ${then}.`;
}

function leadingCrossing({ crossings }: Crossover): Crossing | undefined {
  return crossings.find(({ leading }) => leading);
}

function crossingSentence(now: Crossover, then: Crossover): string | undefined {
  const [mine, other] = [leadingCrossing(now), leadingCrossing(then)];
  if (mine === undefined && other === undefined) return undefined;
  if (mine === undefined) return `Then ${nameInSentence(other!.to)} took the lead at ${bySide(Math.round(other!.size))} taps; now no other method does.`;
  if (other === undefined) return `Now ${nameInSentence(mine.to)} takes the lead at ${bySide(Math.round(mine.size))} taps; then no other method did.`;
  if (mine.from !== other.from || mine.to !== other.to)
    return `The lead changes between other methods than then: from ${nameInSentence(other.from)} to ${nameInSentence(other.to)} at ${bySide(Math.round(other.size))} taps.`;
  const meet = mine.interval[0] <= other.interval[1] && other.interval[0] <= mine.interval[1];
  if (meet) return "The lead changes at the same size, within what can be told.";
  return `The lead changes at ${bySide(Math.round(mine.size))} taps instead of ${bySide(Math.round(other.size))}.`;
}

/** When and where the other results are from. */
function origin(now: Crossover, then: Crossover): string {
  const when = dateInWords(then.date) || "an unknown day";
  return now.host === then.host ? `on ${when}` : `on ${then.host}, ${when}`;
}

/** What differs from earlier results, in two or three sentences; what cannot be compared is said. */
export function differenceInWords(now: Crossover, then: Crossover): string {
  const [mine, other] = [now, then].map(({ layout, separable }) => described(layout, separable));
  const caution = mine === other ? [] : [`The earlier results are for something else, so read this with care: ${other}.`];
  if (now.threads !== then.threads)
    caution.push(`They were measured with ${then.threads} ${then.threads === 1 ? "thread" : "threads"}, these with ${now.threads}.`);
  const factors = methodOrder.map((method) => factorOf(now, then, method)).filter((factor) => factor !== undefined);
  if (factors.length === 0) return [...caution, "No method was timed both then and now at sizes that overlap, so the speeds cannot be compared."].join(" ");
  return [...caution, speedSentence(factors, origin(now, then)), crossingSentence(now, then)].filter((part) => part !== undefined).join(" ");
}
