import { ConvolutionError, type Kernel, kernel } from "../index.js";
import { type Builder, type BuilderValue, builders } from "./builders.js";
import { readNumber } from "./numbers.js";

/**
 * Reads a kernel as it is written on the command line.
 *
 *     builder  name value … or name=value …      "gaussian 3", "box width=9 height=1", "sobel x"
 *     taps     rows parted by ";", then "/n"     "1 2 1; 2 4 2; 1 2 1 /16"
 *
 * @throws ConvolutionError `usage` where it cannot be read; what the builders and `kernel` throw where it can
 */
export function readKernelExpression(text: string): Kernel {
  const trimmed = text.trim();
  if (/^[a-z]/i.test(trimmed)) return fromBuilder(trimmed);
  return fromTaps(trimmed);
}

function fromBuilder(text: string): Kernel {
  const [name, ...words] = text.replaceAll(/\s*([=,])\s*/g, "$1").split(/\s+/);
  if (!Object.hasOwn(builders, name!)) throw unreadable(text, `there is no builder "${name}"`, `one of ${Object.keys(builders).join(", ")}`);
  const chosen = builders[name!]!;
  const form = `${name} ${chosen.parameters.map((parameter, index) => (index < chosen.required ? parameter : `[${parameter}]`)).join(" ")}`.trim();
  return chosen.build(readValues(text, words, chosen, form));
}

/** Bare values fill the parameters in order; after the first name=value only those may follow. */
function readValues(text: string, words: readonly string[], { parameters, required }: Builder, form: string): Record<string, BuilderValue> {
  const values: Record<string, BuilderValue> = {};
  let named = false;
  words.forEach((word, index) => {
    const equals = word.indexOf("=");
    if (equals < 0 && named) throw unreadable(text, `"${word}" without a name follows a value with one`, form);
    named ||= equals >= 0;
    const name = named ? word.slice(0, equals) : parameters[index];
    if (name === undefined) throw unreadable(text, `"${word}" is one value too many`, form);
    if (Object.hasOwn(values, name)) throw unreadable(text, `${name} is given twice`, form);
    values[name] = readValue(word.slice(equals + 1));
  });
  const missing = parameters.slice(0, required).find((name) => !Object.hasOwn(values, name));
  if (missing !== undefined) throw unreadable(text, `${missing} is missing`, form);
  return values;
}

/** A number, a pair "x,y" of numbers, or a word. */
function readValue(word: string): BuilderValue {
  const [first, second, ...more] = word.split(",").map(readNumber);
  if (first === undefined || more.length > 0 || (second === undefined && word.includes(","))) return word;
  return second === undefined ? first : { x: first, y: second };
}

function fromTaps(text: string): Kernel {
  const form = 'rows of numbers parted by ";", at the end a divisor for all of them if need be: "1 2 1; 2 4 2; 1 2 1 /16"';
  const [list, divisorText, ...more] = text.split("/");
  const divisor = divisorText === undefined ? 1 : readNumber(divisorText);
  if (more.length > 0 || divisor === undefined || divisor === 0) throw unreadable(text, 'what follows "/" is not one divisor at the end', form);
  const rows = list!
    .replace(/;\s*$/, "")
    .split(";")
    .map((row) =>
      row
        .trim()
        .split(/\s*,\s*|\s+/)
        .map((tap) => {
          const value = readNumber(tap);
          if (value === undefined) throw unreadable(text, tap === "" ? "a tap is missing" : `"${tap}" is not a number`, form);
          return value / divisor;
        }),
    );
  return kernel(rows);
}

function unreadable(text: string, what: string, form: string): ConvolutionError {
  return new ConvolutionError("usage", `Kernel "${text}" cannot be read: ${what}. Expected: ${form}. "tapwise filter --help" lists every form.`, {
    expected: form,
    received: text,
  });
}
