import type { Build, Candidate, Explanation, HardwareProfile, Verdict } from "../types.js";
import type { Choice } from "./choose.js";
import type { Problem } from "./problem.js";

/** Columns of the printed table: a title and what stands below it. */
const allColumns: readonly [title: string, cell: (candidate: Candidate) => string][] = [
  ["method", ({ method, terms }) => (terms !== undefined && terms > 1 ? `${method} (${terms} terms)` : method)],
  ["threads", ({ threads }) => (threads === undefined ? "" : String(threads))],
  ["each run", ({ milliseconds }) => (milliseconds === undefined ? "" : `${threeDigits(milliseconds)} ms`)],
  ["set-up", ({ setupMilliseconds }) => (setupMilliseconds === undefined ? "" : `${threeDigits(setupMilliseconds)} ms`)],
  ["memory", ({ bytes }) => (bytes === undefined ? "" : memory(bytes))],
  ["error at most", ({ errorBound }) => (errorBound === undefined ? "" : threeDigits(errorBound))],
];

function threeDigits(value: number): string {
  if (value === 0 || (value >= 0.001 && value < 1000)) return String(Number(value.toPrecision(3)));
  return value < 0.001 ? value.toExponential(1) : String(Math.round(value));
}

function memory(bytes: number): string {
  return bytes < 1048576 ? `${Math.ceil(bytes / 1024)} KiB` : `${threeDigits(bytes / 1048576)} MiB`;
}

/** The first column is set left, the others right; a refusal takes the rest of its line. */
function printed(explanation: Explanation): string {
  const columns = allColumns.filter(([, cell]) => explanation.candidates.some((candidate) => cell(candidate) !== ""));
  const open = explanation.candidates.filter(({ refused }) => refused === undefined);
  const cells = [columns.map(([title]) => title), ...open.map((candidate) => columns.map(([, cell]) => cell(candidate)))];
  const widths = columns.map((_, c) => Math.max(...cells.map((row) => row[c]!.length)));
  const named = Math.max(widths[0]!, ...explanation.candidates.map(({ method }) => method.length));
  const line = (row: string[]): string => row.map((cell, c) => (c === 0 ? cell.padEnd(named) : cell.padStart(widths[c]!))).join("  ");
  const lines = [explanation.because, "", `  ${line(cells[0]!)}`];
  for (const candidate of explanation.candidates) {
    const mark = candidate.method === explanation.method ? "→ " : "  ";
    const row = candidate.refused ? `${candidate.method.padEnd(named)}  ${candidate.refused}` : line(columns.map(([, cell]) => cell(candidate)));
    lines.push(mark + row);
  }
  lines.push("", `  arithmetic: ${explanation.arithmetic}`, `  predicted for the ${explanation.build} build by the profile "${explanation.profile}"`);
  return lines.join("\n");
}

const standing = ({ method, milliseconds }: Verdict): string =>
  milliseconds[method] === Math.min(...Object.values(milliseconds)) ? "fastest" : "level with the fastest";

const shownTimes = ({ milliseconds }: Verdict): string =>
  Object.entries(milliseconds)
    .toSorted(([, a], [, b]) => a - b)
    .map(([method, time]) => `${method} ${threeDigits(time)} ms`)
    .join(", ");

/** Why the method was taken, in one sentence. */
function reason(choice: Choice, problem: Problem, once: boolean): string {
  const { chosen, candidates } = choice;
  const threads = (chosen.threads ?? 1) > 1 ? ` on ${chosen.threads} threads` : "";
  const what = `${chosen.method}${threads} for ${problem.horizontal.taps}×${problem.vertical.taps} taps on ${problem.horizontal.count}×${problem.vertical.count}×${problem.channels} results`;
  if (problem.like) return `${what}: the method that the filter was prepared with.`;
  if (problem.request.method !== "auto") return `${what}: asked for by name.`;
  if (choice.verdict) return `${what}: ${standing(choice.verdict)} when timed (${shownTimes(choice.verdict)}), ${choice.verdict.date.slice(0, 10)}.`;
  const time = (candidate: Candidate): number => candidate.milliseconds! + (once ? candidate.setupMilliseconds! : 0);
  const others = candidates.filter((candidate) => candidate.refused === undefined && candidate !== chosen);
  if (others.length === 0) return `${what}: the only method that applies.`;
  const next = others.reduce((a, b) => (time(b) < time(a) ? b : a));
  const counted = once ? "set-up and one run" : "each run";
  const ratio = time(next) / time(chosen);
  if (ratio < 1.01 || time(next) - time(chosen) < 0.001)
    return `${what}: level with ${next.method} in time (${counted}), and its error bound or memory is smaller.`;
  return `${what}: predicted ${threeDigits(time(chosen))} ms for ${counted}, ${threeDigits(ratio)} times as fast as the next, ${next.method}.`;
}

/** Where it was measured, and the sentences that stand with it. */
const nameOf = ({ host, notes = [] }: HardwareProfile): string => (notes.length === 0 ? host : `${host}. ${notes.join(" ")}`);

/** Puts an explanation together; `toString` is there for printing and does not count as data. */
export function explanationOf(choice: Choice, problem: Problem, profile: HardwareProfile, once: boolean): Explanation {
  const { chosen, candidates } = choice;
  const build: Build = problem.build;
  const data = {
    method: chosen.method,
    arithmetic: chosen.arithmetic!,
    ...(chosen.terms === undefined ? {} : { terms: chosen.terms }),
    because: reason(choice, problem, once),
    errorBound: chosen.errorBound!,
    bytes: chosen.bytes!,
    threads: chosen.threads ?? 1,
    milliseconds: chosen.milliseconds!,
    setupMilliseconds: chosen.setupMilliseconds!,
    build,
    profile: nameOf(profile),
    candidates,
  };
  const print = (): string => printed(data);
  Object.defineProperty(data, "toString", { value: print, enumerable: false });
  Object.defineProperty(data, Symbol.for("nodejs.util.inspect.custom"), { value: print, enumerable: false });
  return data;
}
