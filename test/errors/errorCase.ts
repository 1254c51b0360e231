import type { Bench } from "./bench.js";

/** One way to get an error. */
export interface ErrorCase {
  title: string;
  /** Must throw, or reject. */
  act(bench: Bench): unknown;
  /** Words and numbers that the message must have. */
  says?: (string | RegExp)[];
}

/** Passes a value that TypeScript would not let through, as a caller in JavaScript can. */
export function untyped<T>(value: unknown): T {
  return value as T;
}
