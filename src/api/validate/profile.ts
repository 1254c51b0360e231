import { ConvolutionError } from "../../errors.js";
import { operationNames } from "../../planning/cost.js";
import { methodNames } from "../../planning/methods.js";
import type { Build, HardwareProfile, Method, ProfileCheck, Verdict } from "../../types.js";

/** Every form of the core. */
export const builds: readonly Build[] = ["simd", "scalar", "relaxed-simd"];

/** An engine keeps so many verdicts, the latest. */
export const mostVerdicts = 2000;

/** Far more than any measurement writes: what is larger was not written by one. */
const most = { verdicts: mostVerdicts, checks: 1000, notes: 100, letters: 2000 };

/** A price above a quarter of an hour is none, and sums of products with counts stay finite below it. */
const mostNanoseconds = 1e12;

function refuse(found: string, expected: string): never {
  const message = `The profile cannot be used: ${found}. Needed: ${expected}. Measure it anew, or leave it out to use the shipped one.`;
  throw new ConvolutionError("invalid-profile", message, { expected, received: found });
}

type Fields = Record<string, unknown>;

const shownShort = (value: unknown): string =>
  typeof value === "string" ? `"${value.slice(0, 40)}"` : Array.isArray(value) ? "an array" : String(value).slice(0, 40);

/** Own fields only: what a prototype adds is no part of the data. */
function fieldsOf(given: unknown, what: string, expected: string): Fields {
  if (typeof given !== "object" || given === null || Array.isArray(given)) refuse(`${what} is ${given === null ? "null" : shownType(given)}`, expected);
  return Object.assign(Object.create(null) as Fields, given);
}

const shownType = (value: unknown): string => (value === undefined ? "missing" : Array.isArray(value) ? "an array" : typeof value);

function text(value: unknown, what: string): string {
  if (typeof value !== "string") refuse(`${what} is ${shownType(value)}`, "a text");
  if (value.length > most.letters) refuse(`${what} has ${value.length} characters`, `at most ${most.letters}`);
  return value;
}

function number(value: unknown, what: string, largest = Number.MAX_VALUE): number {
  if (typeof value !== "number" || !Number.isFinite(value) || value < 0 || value > largest)
    refuse(`${what} is ${shownShort(value)}`, `a number, 0 or more${largest < Number.MAX_VALUE ? ` and at most ${largest}` : ""}`);
  return value;
}

function list<T>(given: unknown, what: string, longest: number, read: (entry: unknown, what: string) => T): T[] {
  if (!Array.isArray(given)) refuse(`${what} is ${shownType(given)}`, "an array");
  if (given.length > longest) refuse(`${what} has ${given.length} entries`, `at most ${longest}`);
  // Holes are entries too, which map would pass over.
  return Array.from(given, (entry: unknown, index) => read(entry, `${what}[${index}]`));
}

function methodOf(value: unknown, what: string): Method {
  if (!methodNames.includes(value as Method)) refuse(`${what} is ${shownShort(value)}`, methodNames.join(", "));
  return value as Method;
}

function verdictOf(given: unknown, what: string): Verdict {
  const { shape, method, milliseconds, date } = fieldsOf(given, what, "a verdict");
  const times = fieldsOf(milliseconds, `${what}.milliseconds`, "milliseconds by method");
  return {
    shape: text(shape, `${what}.shape`),
    method: methodOf(method, `${what}.method`),
    milliseconds: Object.fromEntries(Object.keys(times).map((name) => [methodOf(name, `${what}.milliseconds`), number(times[name], `${what}.milliseconds`)])),
    date: text(date, `${what}.date`),
  };
}

function checkOf(given: unknown, what: string): ProfileCheck {
  const { problem, method, predicted, measured } = fieldsOf(given, what, "a check");
  return {
    problem: text(problem, `${what}.problem`),
    method: methodOf(method, `${what}.method`),
    predicted: number(predicted, `${what}.predicted`),
    measured: number(measured, `${what}.measured`),
  };
}

function pricesOf(given: unknown): Record<string, number> {
  const prices = fieldsOf(given, "nanoseconds", "nanoseconds by operation");
  return Object.fromEntries(operationNames.map((name) => [name, number(prices[name], `nanoseconds.${name}`, mostNanoseconds)]));
}

function spreadOf(given: unknown): Record<string, number> {
  const spread = fieldsOf(given, "spread", "standard errors by operation");
  return Object.fromEntries(operationNames.filter((name) => spread[name] !== undefined).map((name) => [name, number(spread[name], `spread.${name}`)]));
}

/**
 * A profile as plain data of our own: nothing but the fields that are known, each in its range. What else the object holds is left behind.
 *
 * @throws ConvolutionError `invalid-profile`
 */
export function checkedProfile(given: unknown): HardwareProfile {
  const { version, host, build, threads, date, nanoseconds, spread, checks, verdicts, notes } = fieldsOf(given, "it", "an object");
  if (version !== 2) refuse(`version is ${shownShort(version)}`, "version 2");
  if (!builds.includes(build as Build)) refuse(`build is ${shownShort(build)}`, builds.map((name) => `"${name}"`).join(" or "));
  if (!Number.isInteger(threads) || (threads as number) < 1) refuse(`threads is ${shownShort(threads)}`, "a whole number, 1 or more");
  return {
    version: 2,
    host: text(host, "host"),
    build: build as Build,
    threads: threads as number,
    date: text(date, "date"),
    nanoseconds: pricesOf(nanoseconds),
    ...(spread === undefined ? {} : { spread: spreadOf(spread) }),
    ...(checks === undefined ? {} : { checks: list(checks, "checks", most.checks, checkOf) }),
    ...(verdicts === undefined ? {} : { verdicts: list(verdicts, "verdicts", most.verdicts, verdictOf) }),
    ...(notes === undefined ? {} : { notes: list(notes, "notes", most.notes, text) }),
  };
}

/**
 * A profile for an engine of this build and with so many threads. Another build has other prices, and is refused. Prices of one thread hold
 * for several: what the hand-over costs is then an estimate, which a note tells.
 *
 * @throws ConvolutionError `invalid-profile` where it was measured with another build
 */
export function profileFor(profile: HardwareProfile, build: Build, threads: number): HardwareProfile {
  if (profile.build !== build) refuse(`it was measured with the ${profile.build} build`, `a profile of the ${build} build`);
  if (profile.threads === threads) return profile;
  const note = `Measured with ${counted(profile.threads)}, used with ${counted(threads)}: what threads cost each other is an estimate.`;
  return { ...profile, notes: [...(profile.notes ?? []).filter((known) => known !== note), note] };
}

const counted = (threads: number): string => (threads === 1 ? "1 thread" : `${threads} threads`);
