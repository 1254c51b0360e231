import type { Crossing, Crossover, CrossoverRow } from "../measure/types.js";
import { bySide, dateInWords, listed, percent, threadsInWords } from "./figures.js";
import { borderInWords, kernelsInWords, layoutInWords } from "./layoutWords.js";
import { capitalised, methodOrder, nameAndVerb, nameInSentence } from "./methodNames.js";

/** The answer, and how sure it is: both without a full stop. */
export interface Answer {
  answer: string;
  /** Between which sizes the changes lie; "" where there are none. */
  certainty: string;
}

/**
 * What was found, in one sentence for somebody who knows nothing of the methods.
 *
 * @param crossover finished, or what has been measured so far
 * @returns plain text; it holds no string of the crossover but method names and numbers
 * such as "From about 9×9 taps on, the FFT is faster than direct sums on this device; the change lies between 7×7 and 11×11."
 */
export function answerSentence(crossover: Crossover): string {
  const { answer, certainty } = answerOf(crossover);
  return certainty === "" ? `${answer}.` : `${answer}; ${certainty}.`;
}

/** The same in two parts. */
export function answerOf({ rows, crossings }: Crossover): Answer {
  if (rows.length === 0) return { answer: "No kernel size has been measured yet", certainty: "" };
  const leading = crossings.filter((one) => one.leading).toSorted((a, b) => a.size - b.size);
  if (leading.length === 0) return { answer: noChange(rows), certainty: "" };
  const answer = leading.length === 1 ? oneChange(leading[0]!) : severalChanges(leading);
  return { answer: `${answer}${later(rows, leading.at(-1)!)}`, certainty: certaintyOf(leading) };
}

/** Where the largest kernels have another leader than the last certain change gives them. */
function later(rows: readonly CrossoverRow[], { to }: Crossing): string {
  const last = rows.reduce((a, b) => (b.size > a.size ? b : a));
  if (last.fastest === to) return "";
  return `, and ${nameAndVerb(last.fastest)} fastest at ${bySide(last.size)}, from a size on that the time did not suffice to find`;
}

/** Where lines meet that no user of the fastest method would notice: one sentence for each. */
export function otherCrossingSentences({ crossings }: Crossover): string[] {
  return crossings
    .filter(({ leading }) => !leading)
    .map(
      (one) =>
        `${capitalised(nameInSentence(one.to))} ${one.to === "fft" ? "overtakes" : "overtake"} ${nameInSentence(one.from)} at ${around(one)}, where another method is faster than both.`,
    );
}

/** What was measured: images, kernels and border. */
export function subjectSentence({ layout, separable, border }: Crossover): string {
  return `Measured with images of ${layoutInWords(layout)}, and ${kernelsInWords(separable)}; border ${borderInWords(border)}.`;
}

/** Where and when it was measured, and what predicted. */
export function machineSentence({ host, build, threads, date, profile }: Crossover): string {
  return `Measured on ${host}, ${build} build, ${threadsInWords(threads)}, on ${dateInWords(date)}; predicted by the profile “${profile}”.`;
}

/** How good the engine's choice would have been, and what a wrong one costs. */
export function regretSentence({ rows }: Crossover): string {
  const compared = rows.filter(({ regret, milliseconds }) => Number.isFinite(regret) && Object.keys(milliseconds).length > 1);
  if (compared.length === 0) return "There are not two methods to compare yet.";
  const wrong = compared.filter(({ regret }) => regret > 0);
  const of = compared.length === 1 ? "the one size" : compared.length === 2 ? "both sizes" : `all ${compared.length} sizes`;
  if (wrong.length === 0) return `The engine would have chosen the fastest method at ${of}, or one that is as fast within the noise.`;
  const worst = wrong.reduce((a, b) => (b.regret > a.regret ? b : a));
  const right = compared.length - wrong.length;
  return (
    `The engine would have chosen the fastest method, or one as fast within the noise, at ${right} of ${compared.length} sizes. ` +
    `${wrong.length === 1 ? "At the other" : "At the others"} it would have taken ${wrong.length === 1 ? "" : "up to "}${percent(worst.regret)} longer than with the fastest` +
    `${wrong.length === 1 ? ` (${bySide(worst.size)})` : ` (at ${bySide(worst.size)})`}.`
  );
}

function oneChange(crossing: Crossing): string {
  return `From ${about(crossing)} taps on, ${nameAndVerb(crossing.to)} faster than ${nameInSentence(crossing.from)} on this device`;
}

/** Who leads from where to where; change by change where noise hides how one lead follows the other. */
function severalChanges(leading: readonly Crossing[]): string {
  const isChain = leading.every((one, k) => k === 0 || one.from === leading[k - 1]!.to);
  if (!isChain) {
    const changes = leading.map((one) => `${nameAndVerb(one.to)} faster than ${nameInSentence(one.from)} from ${about(one)} taps on`);
    return `On this device ${listed(changes)}`;
  }
  const first = `${nameAndVerb(leading[0]!.from)} fastest up to ${about(leading[0]!)} taps`;
  const middle = leading.slice(1).map((next) => `${nameInSentence(next.from)} from there to ${about(next)}`);
  const last = `${nameInSentence(leading.at(-1)!.to)} for larger kernels`;
  return `On this device ${listed([first, ...middle, last])}`;
}

function noChange(rows: readonly CrossoverRow[]): string {
  const sizes = rows.map(({ size }) => size);
  const [low, high] = [Math.min(...sizes), Math.max(...sizes)];
  const where = low === high ? `at ${bySide(low)} taps, the only size measured` : `at every size measured, from ${bySide(low)} to ${bySide(high)} taps`;
  const timed = methodOrder.filter((method) => rows.some(({ milliseconds }) => milliseconds[method] !== undefined));
  if (timed.length < 2) return `Only ${nameInSentence(timed[0] ?? rows[0]!.fastest)} could be timed, so there is nothing to compare`;
  const leaders = methodOrder.filter((method) => rows.some(({ fastest }) => fastest === method));
  if (leaders.length === 1) return `On this device ${nameAndVerb(leaders[0]!)} fastest ${where}`;
  return `On this device ${listed(leaders.map(nameInSentence))} are fastest in turn from ${bySide(low)} to ${bySide(high)} taps; where they change places, they are nearer than the noise`;
}

/** "about 9×9": the size is where two lines between measured sizes meet. */
function about({ size }: Crossing): string {
  return `about ${bySide(Math.round(size))}`;
}

function around(crossing: Crossing): string {
  const bounds = interval(crossing);
  return `${about(crossing)} taps${bounds === "" ? "" : ` (between ${bounds})`}`;
}

/** "7×7 and 11×11", rounded outwards; nothing where both ends are one size. */
function interval({ interval: [low, high] }: Crossing): string {
  const [from, to] = [Math.floor(low), Math.ceil(high)];
  return from === to ? "" : `${bySide(from)} and ${bySide(to)}`;
}

function certaintyOf(crossings: readonly Crossing[]): string {
  const known = crossings.map(interval).filter((bounds) => bounds !== "");
  if (known.length === 0) return "";
  return known.length === 1 ? `the change lies between ${known[0]}` : `the changes lie ${listed(known.map((bounds) => `between ${bounds}`))}`;
}
