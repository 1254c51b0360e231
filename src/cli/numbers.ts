import { ConvolutionError } from "../index.js";

const decimal = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;

/** A decimal number or a fraction of two ("0.8", "1e-3", "1/257"), or undefined for anything else. */
export function readNumber(text: string): number | undefined {
  const parts = text.trim().split("/");
  if (parts.length > 2 || !parts.every((part) => decimal.test(part.trim()))) return undefined;
  const [above, below = 1] = parts.map(Number);
  const value = above! / below;
  return Number.isFinite(value) ? value : undefined;
}

/** A number of an option. @throws ConvolutionError `usage` */
export function numberOption(text: string, option: string): number {
  return readNumber(text) ?? refuseValue(option, text, "a number such as 0.5, 1e-3 or 1/257");
}

/** Whole numbers, parted by commas, blanks or ×. @throws ConvolutionError `usage` */
export function wholeNumbers(text: string, count: number, option: string, form: string): number[] {
  const numbers = text
    .trim()
    .split(/\s*[,×x]\s*|\s+/)
    .map((part) => readNumber(part));
  if (numbers.length !== count || !numbers.every((value) => value !== undefined && Number.isInteger(value))) return refuseValue(option, text, form);
  return numbers as number[];
}

const bytesOfUnit: Readonly<Record<string, number>> = { "": 1, B: 1, KIB: 2 ** 10, MIB: 2 ** 20, GIB: 2 ** 30, KB: 1e3, MB: 1e6, GB: 1e9 };

/** An amount of memory: bytes, or a number with a unit ("512 MiB", "1.5GB"). @throws ConvolutionError `usage` */
export function byteCount(text: string, option: string): number {
  const [, amount = "", unit = ""] = /^([\d.]+)\s*([a-z]*)$/i.exec(text.trim()) ?? [];
  const value = (readNumber(amount) ?? NaN) * (bytesOfUnit[unit.toUpperCase()] ?? NaN);
  if (!(value >= 1)) return refuseValue(option, text, "a number of bytes, such as 67108864, 64MiB or 1GiB");
  return Math.floor(value);
}

/** Says which option has a value it cannot have. */
export function refuseValue(option: string, received: string, expected: string): never {
  throw new ConvolutionError("usage", `${option} "${received}" is not understood: it takes ${expected}.`, { expected, received });
}
