import { ConvolutionError } from "../errors.js";
import { compensatedSum } from "../math/compensatedSum.js";

/**
 * An immutable kernel: taps, size and origin.
 *
 * Convolution lays the taps on the image reversed, with `origin` on the sample whose result is computed:
 *
 *     y[r, c] = Σⱼ Σᵢ taps[j · width + i] · x[r − (j − origin.y), c − (i − origin.x)],   0 ≤ j < height, 0 ≤ i < width
 */
export interface Kernel {
  readonly width: number;
  readonly height: number;
  /** The tap that lies on the sample whose result is computed. */
  readonly origin: { readonly x: number; readonly y: number };
  /** Row-major taps, length width · height; a fresh copy at each read. */
  readonly taps: Float64Array<ArrayBuffer>;
  /** Σ taps, by compensated summation in double precision. */
  readonly sum: number;
}

export interface Origin {
  /** Column of the origin, 0 … width − 1. */
  x: number;
  /** Row of the origin, 0 … height − 1. */
  y: number;
}

/** Taps above this round to infinity in the engine's single-precision arithmetic. */
const largestTap = 3.4028234663852886e38;

/** Kernels above this many taps (512 MiB of them) are refused instead of ending in the host's out-of-memory error. */
export const largestTapCount = 67_108_864;

/** Largest kernels whose taps are printed in full. */
const printedSide = 9;

class TapKernel implements Kernel {
  readonly width: number;
  readonly height: number;
  readonly origin: { readonly x: number; readonly y: number };
  readonly sum: number;
  readonly #taps: Float64Array<ArrayBuffer>;

  constructor(width: number, height: number, taps: Float64Array<ArrayBuffer>, origin: Origin) {
    this.width = width;
    this.height = height;
    this.origin = Object.freeze({ x: origin.x, y: origin.y });
    this.sum = compensatedSum(taps);
    this.#taps = taps;
    Object.freeze(this);
  }

  get taps(): Float64Array<ArrayBuffer> {
    return this.#taps.slice();
  }

  toString(): string {
    const { width, height, origin, sum } = this;
    return `kernel ${width}×${height}, origin (${origin.x}, ${origin.y}), sum ${sum}`;
  }

  /** Plain data for JSON; `asKernel` makes the same kernel of it again. */
  toJSON(): { width: number; height: number; origin: Origin; taps: number[] } {
    return { width: this.width, height: this.height, origin: { ...this.origin }, taps: Array.from(this.#taps) };
  }

  [Symbol.for("nodejs.util.inspect.custom")](): string {
    if (this.width > printedSide || this.height > printedSide) return this.toString();
    return `${this.toString()}\n${printedRows(this.#taps, this.width)}`;
  }

  static tapsOf(kernel: Kernel): Float64Array<ArrayBuffer> {
    return kernel instanceof TapKernel ? kernel.#taps : kernel.taps;
  }

  static is(value: unknown): value is TapKernel {
    return typeof value === "object" && value !== null && #taps in value;
  }
}

/**
 * The taps without a copy, for reading only. A kernel that some other code made (a plain object of the same shape)
 * is read through its `taps`.
 */
export function readTaps(kernel: Kernel): Float64Array<ArrayBuffer> {
  return TapKernel.tapsOf(kernel);
}

/**
 * Makes a kernel of taps that nobody else holds, and checks them: the one way by which every kernel comes into being.
 * Negative zeros become zeros.
 *
 * @throws ConvolutionError `invalid-kernel`, `invalid-origin`, `unknown-option`
 */
export function makeKernel(width: number, height: number, taps: Float64Array<ArrayBuffer>, origin?: Origin): Kernel {
  for (let k = 0; k < taps.length; k++) {
    const tap = taps[k]!;
    if (!(Math.abs(tap) <= largestTap)) refuseTap(tap, k % width, Math.floor(k / width));
    taps[k] = tap + 0;
  }
  return new TapKernel(width, height, taps, checkedOrigin(width, height, origin));
}

/**
 * Whatever a caller handed in as a kernel, as a kernel: the package's own are given back as they are, plain objects
 * `{ width, height, origin, taps }` (read from JSON, or cloned to a worker) are checked and copied.
 *
 * @throws ConvolutionError `invalid-kernel`, `invalid-origin`
 */
export function asKernel(value: unknown): Kernel {
  if (TapKernel.is(value)) return value;
  const advice = "Make one with kernel(rows), outer(columnTaps, rowTaps) or a builder such as gaussian({ sigma: 2 }).";
  if (typeof value !== "object" || value === null || !("taps" in value)) {
    const expected = "a kernel";
    const received = value === null ? "null" : Array.isArray(value) ? "an array" : typeof value;
    throw new ConvolutionError("invalid-kernel", `A kernel was needed, ${received} was found. ${advice}`, { expected, received });
  }
  const { width, height, origin, taps } = value as { width: unknown; height: unknown; origin?: Origin; taps: unknown };
  const count = isNumberList(taps) ? taps.length : -1;
  if (!isSide(width) || !isSide(height) || count !== width * height) {
    const found = `width ${String(width)}, height ${String(height)}, ${count < 0 ? "no list of taps" : `${count} taps`}`;
    const message = `A kernel needs positive whole width and height and width · height taps; found ${found}. ${advice}`;
    throw new ConvolutionError("invalid-kernel", message, { expected: "width · height taps", received: found });
  }
  return makeKernel(width, height, Float64Array.from(taps as ArrayLike<number>), origin);
}

/** Whether a value is an array of numbers or a typed array (which only holds them). */
export function isNumberList(value: unknown): value is ArrayLike<number> {
  if (Array.isArray(value)) return value.every((item) => typeof item === "number");
  return ArrayBuffer.isView(value) && "length" in value && typeof (value as Uint8Array)[0] !== "bigint";
}

function isSide(value: unknown): value is number {
  return Number.isInteger(value) && (value as number) > 0;
}

function checkedOrigin(width: number, height: number, origin: unknown): Origin {
  if (origin === undefined) return { x: Math.floor((width - 1) / 2), y: Math.floor((height - 1) / 2) };
  const { x, y } = (typeof origin === "object" && origin !== null ? origin : {}) as Partial<Origin>;
  if (isIndex(x, width) && isIndex(y, height)) return { x, y };
  const found = typeof origin === "object" ? `(${String(x)}, ${String(y)})` : String(origin);
  const expected = `whole numbers x 0…${width - 1}, y 0…${height - 1}`;
  const message = `The origin ${found} does not lie on a tap of the ${width}×${height} kernel. Use { x, y } with ${expected}.`;
  throw new ConvolutionError("invalid-origin", message, { expected, received: found });
}

function isIndex(value: unknown, count: number): value is number {
  return Number.isInteger(value) && (value as number) >= 0 && (value as number) < count;
}

function refuseTap(tap: number, column: number, row: number): never {
  const place = `Tap at column ${column}, row ${row} is ${tap}`;
  const message = Number.isFinite(tap)
    ? `${place}, beyond single precision (±${largestTap}). Scale the kernel down and use output.gain for the rest.`
    : `${place}. Every tap must be a finite number.`;
  throw new ConvolutionError("invalid-kernel", message, { expected: `finite, |tap| ≤ ${largestTap}`, received: tap });
}

function printedRows(taps: Float64Array, width: number): string {
  const words = Array.from(taps, (tap) => String(Number(tap.toPrecision(6))));
  const widest = Math.max(...words.map((word) => word.length));
  const rows: string[] = [];
  for (let k = 0; k < words.length; k += width) {
    rows.push(
      `  ${words
        .slice(k, k + width)
        .map((word) => word.padStart(widest))
        .join("  ")}`,
    );
  }
  return rows.join("\n");
}
