import type { Crossing, Crossover, CrossoverRow } from "../measure/types.js";
import { bySide, dateInWords, listed, percent, threadsInWords } from "./figures.js";
import { borderInWords, kernelsInWords, layoutInWords } from "./layoutWords.js";
import { capitalised, methodOrder, nameAndVerb, nameInSentence } from "./methodNames.js";

/**
 * What was found, in one sentence for somebody who knows nothing of the methods.
 *
 * @param crossover finished, or what has been measured so far
 * @returns plain text; it holds no string of the crossover but method names and numbers
 * @example
 * answerSentence(crossover); // "From about 9×9 taps on, the FFT is faster than direct sums on this device; the change lies between 7×7 and 11×11."
 */
export function answerSentence(crossover: Crossover): string {
  const { rows } = crossover;
  if (rows.length === 0) return "No kernel size has been measured yet.";
  const leading = leadingCrossings(crossover);
  if (leading.length === 1) return oneChange(leading[0]!);
  return leading.length > 1 ? severalChanges(leading) : noChange(rows);
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

/** Crossings of the fastest lines, by size, as far as each goes on from where the one before it led. */
function leadingCrossings({ crossings }: Crossover): Crossing[] {
  return crossings.filter(({ leading }) => leading).toSorted((a, b) => a.size - b.size);
}

function oneChange(crossing: Crossing): string {
  return `From ${about(crossing)} taps on, ${nameAndVerb(crossing.to)} faster than ${nameInSentence(crossing.from)} on this device${changeLies([crossing])}.`;
}

function severalChanges(leading: readonly Crossing[]): string {
  const first = `${nameAndVerb(leading[0]!.from)} fastest up to ${about(leading[0]!)} taps`;
  const middle = leading.slice(1).map((next, k) => `${nameInSentence(leading[k]!.to)} from there to ${about(next)}`);
  const last = `${nameInSentence(leading.at(-1)!.to)} for larger kernels`;
  return `On this device ${listed([first, ...middle, last])}${changeLies(leading)}.`;
}

function noChange(rows: readonly CrossoverRow[]): string {
  const sizes = rows.map(({ size }) => size);
  const [low, high] = [Math.min(...sizes), Math.max(...sizes)];
  const where = low === high ? `at ${bySide(low)} taps, the only size measured` : `at every size measured, from ${bySide(low)} to ${bySide(high)} taps`;
  const timed = methodOrder.filter((method) => rows.some(({ milliseconds }) => milliseconds[method] !== undefined));
  if (timed.length < 2) return `Only ${nameInSentence(timed[0] ?? rows[0]!.fastest)} could be timed, so there is nothing to compare.`;
  const [fastest, ...others] = new Set(rows.map((row) => row.fastest));
  if (others.length === 0) return `On this device ${nameAndVerb(fastest!)} fastest ${where}.`;
  return `On this device ${listed([fastest!, ...others].map(nameInSentence))} are fastest in turn from ${bySide(low)} to ${bySide(high)} taps; no crossing stands out from the noise.`;
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

function changeLies(crossings: readonly Crossing[]): string {
  const known = crossings.map(interval).filter((bounds) => bounds !== "");
  if (known.length === 0) return "";
  return known.length === 1 ? `; the change lies between ${known[0]}` : `; the changes lie ${listed(known.map((bounds) => `between ${bounds}`))}`;
}
