import { ConvolutionError } from "../errors.js";
import { nearestName } from "../math/nearestName.js";

/**
 * Refuses options that nobody reads, with the one that was probably meant.
 *
 * @throws ConvolutionError `unknown-option`, `unknown-value` (not an object)
 */
export function checkOptionNames(where: string, options: unknown, names: readonly string[]): void {
  if (Object.prototype.toString.call(options) !== "[object Object]") {
    const received = Object.prototype.toString.call(options).slice(8, -1).toLowerCase();
    const message = `${where} takes its options as an object with ${listed(names)}; found ${received}.`;
    throw new ConvolutionError("unknown-value", message, { expected: "an object of options", received });
  }
  for (const given of Object.keys(options as object)) {
    if (names.includes(given)) continue;
    const nearest = nearestName(given, names);
    const advice = nearest === undefined ? `It takes ${listed(names)}.` : `Did you mean "${nearest}"?`;
    throw new ConvolutionError("unknown-option", `${where} has no option "${given}". ${advice}`, { expected: names, received: given });
  }
}

/**
 * An option that is one of a few words.
 *
 * @throws ConvolutionError `unknown-value`
 */
export function chosenWord<W extends string>(where: string, name: string, value: unknown, words: readonly W[]): W {
  if (words.includes(value as W)) return value as W;
  const nearest = typeof value === "string" ? nearestName(value, words) : undefined;
  const found = typeof value === "string" ? `"${value}"` : String(value);
  const advice = nearest === undefined ? `Use ${listed(words)}.` : `Did you mean "${nearest}"?`;
  throw new ConvolutionError("unknown-value", `${where}: ${name} ${found} is not known. ${advice}`, { expected: words, received: value });
}

/** The numbers that an option may be; `what` says it in words. */
export interface NumberRange {
  what: string;
  least?: number;
  /** The least value itself is refused. */
  above?: number;
  most?: number;
  whole?: boolean;
}

/**
 * An option that is a finite number in a range.
 *
 * @throws ConvolutionError `invalid-number`
 */
export function checkedNumber(where: string, name: string, value: unknown, range: NumberRange): number {
  const { least = -Infinity, above = -Infinity, most = Infinity, whole = false } = range;
  const fits = typeof value === "number" && Number.isFinite(value) && value >= least && value > above && value <= most;
  if (fits && (!whole || Number.isInteger(value))) return value;
  const found = typeof value === "string" ? `"${value}"` : String(value);
  throw new ConvolutionError("invalid-number", `${where}: ${name} is ${found}. It must be ${range.what}.`, { expected: range.what, received: value });
}

/** What a builder was called with, as an object: a bare number or word stands for its one main option. */
export function asOptions<O extends object>(where: string, given: unknown, main: keyof O & string): O {
  if (typeof given === "number" || typeof given === "string") return { [main]: given } as O;
  if (given === undefined) return {} as O;
  if (typeof given === "object" && given !== null && !Array.isArray(given)) return given as O;
  const received = given === null ? "null" : Array.isArray(given) ? "an array" : typeof given;
  const message = `${where} takes an object of options, such as ${where}({ ${main}: … }); found ${received}.`;
  throw new ConvolutionError("unknown-value", message, { expected: "an object of options", received });
}

function listed(names: readonly string[]): string {
  const quoted = names.map((name) => `"${name}"`);
  return quoted.length < 2 ? quoted.join("") : `${quoted.slice(0, -1).join(", ")} or ${quoted.at(-1)}`;
}
