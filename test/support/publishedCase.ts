import type { ConvolveOptions } from "../../src/types.js";
import type { Kernel } from "../../src/kernels/kernel.js";
import { bytePlane, plane, type Answer, type Question } from "./questions.js";

/** A result that somebody else printed, or that follows from what they printed by exact arithmetic. */
export interface PublishedCase {
  title: string;
  question: Question;
  /** Row by row. */
  expected: readonly number[];
  /** Half a unit of the last digit printed; 0 where the values are exact. */
  printedWithin?: number;
}

type Rows = readonly (readonly number[])[];

/** Floats in, floats out. */
export function floatCase(title: string, image: Rows, kernel: Kernel, options: ConvolveOptions, expected: Rows, correlate = false): PublishedCase {
  return { title, question: { image: plane(image), kernel, options, correlate }, expected: expected.flat() };
}

/** Bytes in, bytes out. */
export function byteCase(title: string, image: Rows, kernel: Kernel, options: ConvolveOptions, expected: Rows, correlate = false): PublishedCase {
  return { title, question: { image: bytePlane(image), kernel, options, correlate }, expected: expected.flat() };
}

/** The first place where an answer is further from what is printed than its own bound, as a sentence. */
export function difference(answer: Answer, expected: ArrayLike<number>, magnitude = 1, printedWithin = 0): string | undefined {
  if (answer.data.length !== expected.length) return `${answer.from}: ${answer.data.length} samples, not ${expected.length}`;
  const integers = answer.data instanceof Uint8Array || answer.data instanceof Uint16Array || answer.data instanceof Uint8ClampedArray;
  const allowed = integers ? 0 : answer.errorBound * magnitude + printedWithin;
  for (let index = 0; index < expected.length; index++) {
    if (Math.abs(answer.data[index]! - expected[index]!) <= allowed) continue;
    const place = `row ${Math.floor(index / answer.width / answer.channels)}, sample ${index % (answer.width * answer.channels)}`;
    return `${answer.from}, ${place}: ${answer.data[index]}, printed ${expected[index]}, allowed ±${allowed}`;
  }
  return undefined;
}

/** How much larger than full value an image's samples are: bounds grow in proportion. */
export function magnitudeOf({ image, options }: Question): number {
  if (!(image.data instanceof Float32Array)) return 1;
  const border = JSON.stringify(options?.border ?? "");
  const constants = (border.match(/-?\d+(\.\d+)?/g) ?? []).map((text) => Math.abs(Number(text)));
  return Math.max(1, ...constants, ...Array.from(image.data, Math.abs));
}
