/** Whose move it is after an error: the caller's, the owner of a disposed object's, or nobody's but ours (`internal`). */
export type Fault = "caller" | "state" | "capacity" | "host" | "internal";

/** Every error code with its fault: the one table that the class, the README and the error tests read. */
export const faultOfCode = {
  "unknown-option": "caller",
  "unknown-value": "caller",
  "invalid-number": "caller",
  "invalid-raster": "caller",
  "unsupported-samples": "caller",
  "detached-samples": "caller",
  "layout-mismatch": "caller",
  "invalid-kernel": "caller",
  "invalid-origin": "caller",
  "border-without-use": "caller",
  "border-not-applicable": "caller",
  "invalid-constant": "caller",
  "empty-result": "caller",
  "invalid-region": "caller",
  "alpha-not-applicable": "caller",
  "method-not-applicable": "caller",
  "invalid-target": "caller",
  "overlapping-target": "caller",
  "invalid-profile": "caller",
  "not-supported": "caller",
  "invalid-png": "caller",
  "file-unreadable": "caller",
  "file-exists": "caller",
  "file-unwritable": "host",
  "usage": "caller",
  "interrupted": "caller",
  "array-in-use": "caller",
  "samples-changed": "caller",
  "kernel-mismatch": "caller",
  "disposed": "state",
  "filter-busy": "state",
  "memory-limit": "capacity",
  "memory-exhausted": "capacity",
  "webassembly-missing": "host",
  "webassembly-blocked": "host",
  "self-test-failed": "host",
  "clock-unusable": "host",
  "internal": "internal",
} as const satisfies Record<string, Fault>;

export type ErrorCode = keyof typeof faultOfCode;

/**
 * The one error class of the package. The message says what was found, what was needed and what to do, with numbers.
 *
 * @example
 * try {
 *   engine.convolve(image, kernel([[1, 2], [3]]));
 * } catch (error) {
 *   if (error instanceof ConvolutionError && error.fault === "caller") report(error.code, error.expected, error.received);
 * }
 */
export class ConvolutionError extends Error {
  override readonly name = "ConvolutionError";
  readonly code: ErrorCode;
  readonly fault: Fault;
  /** What would have been right, as plain data (a sentence, a number, a list of names). */
  readonly expected: unknown;
  /** What was found instead, as plain data. */
  readonly received: unknown;

  constructor(code: ErrorCode, message: string, details: { expected?: unknown; received?: unknown; cause?: unknown } = {}) {
    super(message, details.cause === undefined ? undefined : { cause: details.cause });
    this.code = code;
    this.fault = faultOfCode[code];
    this.expected = details.expected;
    this.received = details.received;
  }
}

/** A value as messages show it: text in quotes, so that "5" is not taken for 5. */
export function shown(value: unknown): string {
  return typeof value === "string" ? `"${value}"` : typeof value === "bigint" ? `${value}n` : String(value);
}

/** What `make` gives; nothing where memory is too short for it. Other errors are thrown on. */
export function unlessShort<T>(make: () => T): T | undefined {
  try {
    return make();
  } catch (error) {
    if (error instanceof ConvolutionError && error.fault === "capacity") return undefined;
    throw error;
  }
}
