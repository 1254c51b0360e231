import { readTaps, type Kernel } from "../kernels/kernel.js";
import { integersOf } from "../math/dyadic.js";
import type { Problem, Request } from "./problem.js";

/**
 * Taps as integers over a power of two: bytes are multiplied by 16-bit taps and added up in 32 bits, exactly. All that differs from the
 * exact result is the rounding of the taps, which the caller's tolerance limits.
 */
export interface FixedTaps {
  /** Signed 16-bit integers. */
  integers: Float64Array;
  /** tap ≈ integer ÷ 2^shift */
  shift: number;
  /** Σ|integer ÷ 2^shift − tap| */
  error: number;
}

const largestWord = 32767;
const sumLimit = 2147483648;
/** Finer steps than this change nothing: 2⁻²⁴ of a tap is what single precision keeps of 1. */
const finestShift = 24;

/** True where results are bytes of bytes and nothing but gain and offset comes between. */
export function bytesThroughout({ request, renormalised }: Problem): boolean {
  const plain = request.alpha === "none" || request.alpha === "keep";
  return request.sample === "u8" && request.output.sample === "u8" && request.light === "encoded" && plain && !renormalised;
}

const powerOfTwo = (exponent: number): number => 1 << exponent;

/** Taps rounded to multiples of 2^−shift; nothing where that is off by more than `mostError`, which large kernels show early. */
export function fixedTaps(taps: Float64Array, shift: number): FixedTaps;
export function fixedTaps(taps: Float64Array, shift: number, mostError: number): FixedTaps | undefined;
export function fixedTaps(taps: Float64Array, shift: number, mostError = Infinity): FixedTaps | undefined {
  const scale = powerOfTwo(shift);
  const integers = new Float64Array(taps.length);
  let error = 0;
  for (let k = 0; k < taps.length; k++) {
    integers[k] = Math.round(taps[k]! * scale);
    error += Math.abs(integers[k]! / scale - taps[k]!);
    if (error > mostError) return undefined;
  }
  return { integers, shift, error };
}

/** The largest shift up to `mostShift` whose integers fit into 16 bits and whose sums, for samples up to `most` and with the offset, fit into 32. */
export function largestShift(taps: Float64Array, most: number, offset: number, mostShift = finestShift): number | undefined {
  let largest = 0;
  let sum = 0;
  for (const tap of taps) {
    largest = Math.max(largest, Math.abs(tap));
    sum += Math.abs(tap);
  }
  for (let shift = mostShift; shift >= 0; shift--) {
    const scale = powerOfTwo(shift);
    // Rounding adds at most ½ to each integer, the bias is the offset and half a unit.
    const bound = most * (sum * scale + taps.length / 2) + (Math.abs(offset) + 1) * scale;
    if (largest * scale <= largestWord && bound < sumLimit) return shift;
  }
  return undefined;
}

/** True where sums over all taps are exact in single precision: then they must stay exact. */
export function exactInFloats(taps: Float64Array, full: number): boolean {
  const integers = integersOf(taps);
  if (!integers) return false;
  let sum = 0;
  for (const integer of integers) sum += Math.abs(integer);
  return sum * full <= 16777216;
}

/** What a sum starts from, so that shifting it rounds half up and adds the offset. */
export function biasOf(offset: number, shift: number): number {
  return Math.round(offset * powerOfTwo(shift)) + (shift > 0 ? powerOfTwo(shift - 1) : 0);
}

export function offsetError(offset: number, shift: number): number {
  return Math.abs(Math.round(offset * powerOfTwo(shift)) / powerOfTwo(shift) - offset);
}

/** Pairs of 16-bit integers in 32 bits, the first one low. */
export function packed(first: number, second: number): number {
  return (first & 0xffff) | (second << 16);
}

/** Result rows r and r + 1 need this many pairs of rows: see the core's bytes/pairs. */
export const pairsOfRows = (rows: number): number => Math.floor(rows / 2) + 1;

/**
 * Taps in the order in which pairs of rows meet them: for pair p and column i the two taps of the upper result row, then of the lower one.
 *
 * @param integers rows × columns in correlation order
 */
export function tapsByPairs(integers: Float64Array, rows: number, columns: number): Int32Array<ArrayBuffer> {
  const lead = 1 - (rows % 2);
  const at = (row: number, column: number): number => (row >= 0 && row < rows ? integers[row * columns + column]! : 0);
  const table = new Int32Array(pairsOfRows(rows) * columns * 2);
  for (let k = 0; k < table.length / 2; k++) {
    const row = 2 * Math.floor(k / columns) - lead;
    const column = k % columns;
    table[2 * k] = packed(at(row, column), at(row + 1, column));
    table[2 * k + 1] = packed(at(row - 1, column), at(row, column));
  }
  return table;
}

const directTaps = /* @__PURE__ */ new WeakMap<Kernel, Map<string, FixedTaps | string>>();

/** Outputs and tolerances that a kernel's integer taps are kept for; a caller that changes them all the time gets them anew. */
const mostKept = 4;

/** Taps of the direct method, gain included, in the kernel's order; or why there are none, as a sentence. Made once for a kernel. */
export function fixedKernel(request: Request): FixedTaps | string {
  const { kernel, output, tolerance } = request;
  const made = directTaps.get(kernel) ?? new Map<string, FixedTaps | string>();
  directTaps.set(kernel, made);
  const key = `${output.gain} ${output.offset} ${tolerance}`;
  let found = made.get(key);
  if (found !== undefined) return found;
  if (made.size >= mostKept) made.clear();
  made.set(key, (found = findFixedKernel(request)));
  return found;
}

function findFixedKernel({ kernel, output, tolerance }: Request): FixedTaps | string {
  const taps = output.gain === 1 ? readTaps(kernel) : readTaps(kernel).map((tap) => tap * output.gain);
  const shift = largestShift(taps, 255, output.offset);
  if (shift === undefined) return "The taps do not fit into 16 bits.";
  const ofOffset = offsetError(output.offset, shift);
  const fixed = fixedTaps(taps, shift, (tolerance - ofOffset) / 255);
  if (!fixed) return `Taps of 16 bits would be off by more than is allowed, ${Number(tolerance.toPrecision(3))} of a level.`;
  const error = 255 * fixed.error + ofOffset;
  if (error > 0 && exactInFloats(readTaps(kernel), 255)) return "Sums of floats are exact here, and taps of 16 bits are not.";
  return fixed;
}
