import { ConvolutionError } from "../errors.js";
import { type Kernel, type Origin, isNumberList, largestTapCount, makeKernel } from "./kernel.js";
import { checkOptionNames } from "./options.js";

export interface KernelOptions {
  /** The tap that lies on the sample whose result is computed. @defaultValue the middle, `(⌊(width − 1) / 2⌋, ⌊(height − 1) / 2⌋)` */
  origin?: Origin | undefined;
}

/**
 * A kernel from its taps, row by row; one flat list is a single row.
 *
 * Convolution turns the taps by 180°, correlation lays them on the image as written.
 *
 * @param rows the taps from top to bottom, each row from left to right, all rows of one length
 * @throws ConvolutionError `invalid-kernel` (empty, ragged, not finite, beyond single precision), `invalid-origin`, `unknown-option`
 * @example
 * const emboss = kernel([[-2, -1, 0], [-1, 1, 1], [0, 1, 2]]);
 * emboss.sum; // 1
 * kernel([1, 2, 1]).height; // 1
 */
export function kernel(rows: readonly ArrayLike<number>[] | ArrayLike<number>, options: KernelOptions = {}): Kernel {
  checkOptionNames("kernel", options, ["origin"]);
  const table = asTable(rows);
  const width = table[0]!.length;
  table.forEach((row, j) => {
    if (row.length !== width) {
      refuse(`Row ${j} of the kernel has ${row.length} taps, row 0 has ${width}. Give every row the same number.`, `${width} taps`, row.length);
    }
  });
  const taps = new Float64Array(allowedTapCount(width, table.length));
  table.forEach((row, j) => taps.set(row, j * width));
  return makeKernel(width, table.length, taps, options.origin);
}

/**
 * The kernel of a column of taps times a row of taps, which the engine filters in two short passes.
 *
 *     taps[j · width + i] = columnTaps[j] · rowTaps[i]
 *
 * @param columnTaps run down the image; as many as the kernel has rows
 * @param rowTaps run along a row; as many as the kernel has columns
 * @throws ConvolutionError `invalid-kernel` (empty, not finite, beyond single precision), `invalid-origin`, `unknown-option`
 * @example
 * outer([1, 2, 1], [-1, 0, 1]).taps; // [-1, 0, 1, -2, 0, 2, -1, 0, 1]
 */
export function outer(columnTaps: ArrayLike<number>, rowTaps: ArrayLike<number>, options: KernelOptions = {}): Kernel {
  checkOptionNames("outer", options, ["origin"]);
  const column = asTaps(columnTaps, "The column of taps");
  const row = asTaps(rowTaps, "The row of taps");
  const width = row.length;
  const taps = new Float64Array(allowedTapCount(width, column.length));
  for (let j = 0; j < column.length; j++) {
    for (let i = 0; i < width; i++) taps[j * width + i] = column[j]! * row[i]!;
  }
  return makeKernel(width, column.length, taps, options.origin);
}

/**
 * width · height, where that is a number of taps that a kernel may have.
 *
 * @throws ConvolutionError `invalid-kernel`
 */
export function allowedTapCount(width: number, height: number): number {
  const count = width * height;
  if (count <= largestTapCount) return count;
  return refuse(`A kernel of ${width}×${height} has ${count} taps; at most ${largestTapCount} are supported. Use a smaller one.`, largestTapCount, count);
}

function asTable(rows: unknown): ArrayLike<number>[] {
  if (Array.isArray(rows) && rows.length > 0 && rows.every((row) => Array.isArray(row) || ArrayBuffer.isView(row))) {
    return rows.map((row, j) => asTaps(row, `Row ${j} of the kernel`));
  }
  return [asTaps(rows, "The kernel")];
}

function asTaps(list: unknown, what: string): ArrayLike<number> {
  const isList = Array.isArray(list) || ArrayBuffer.isView(list);
  if (!isList || !isNumberList(list)) {
    const received = isList ? "something else than numbers" : list === null ? "null" : typeof list;
    return refuse(`${what} must be a list of numbers, or rows of them; found ${received}.`, "numbers", received);
  }
  return list.length > 0 ? list : refuse(`${what} is empty. Give at least one tap.`, "at least one tap", 0);
}

function refuse(message: string, expected: unknown, received: unknown): never {
  throw new ConvolutionError("invalid-kernel", message, { expected, received });
}
