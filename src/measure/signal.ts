import { ConvolutionError } from "../errors.js";

function checked(where: string, name: string, given: unknown, fits: boolean, expected: string): void {
  if (given === undefined || fits) return;
  throw new ConvolutionError("unknown-value", `${where}: ${name} is ${given === null ? "null" : typeof given}. Needed: ${expected}.`, {
    expected,
    received: typeof given,
  });
}

/** @throws ConvolutionError `unknown-value` */
export function checkedSignal<P>(
  where: string,
  { signal, onProgress }: { signal?: AbortSignal; onProgress?: P },
): { signal: AbortSignal | undefined; onProgress: P | undefined } {
  checked(where, "signal", signal, typeof signal === "object" && signal !== null && typeof signal.throwIfAborted === "function", "an AbortSignal");
  checked(where, "onProgress", onProgress, typeof onProgress === "function", "a function");
  return { signal, onProgress };
}

/** @throws ConvolutionError `unknown-value` */
export function checkedFlag(where: string, name: string, given: unknown): boolean {
  checked(where, name, given, typeof given === "boolean", "true or false");
  return given === true;
}
