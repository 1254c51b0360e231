/**
 * An immutable kernel: taps, size and origin.
 */
export interface Kernel {
  readonly width: number;
  readonly height: number;
  /** The tap that lies on the sample whose result is computed. */
  readonly origin: { readonly x: number; readonly y: number };
  /** Row-major taps, length width · height; a fresh copy at each read. */
  readonly taps: Float64Array<ArrayBuffer>;
  readonly sum: number;
}
