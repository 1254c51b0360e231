import { ConvolutionError, shown } from "../../errors.js";
import { checkOptionNames } from "../../kernels/options.js";

/** Options of `runAsync`, each as it should be; the target is checked with the image. */
export interface CheckedRunOptions {
  target: unknown;
  signal: AbortSignal | undefined;
  onProgress: ((progress: number) => void) | undefined;
}

function refuse(name: string, value: unknown, needed: string): never {
  const message = `runAsync: ${name} is ${shown(value)}. It must be ${needed}.`;
  throw new ConvolutionError("unknown-value", message, { expected: needed, received: typeof value });
}

/** Signals of another realm, or of a library, will do. */
function isSignal(value: unknown): value is AbortSignal {
  const { aborted, addEventListener, removeEventListener } = (value ?? {}) as Partial<AbortSignal>;
  return typeof aborted === "boolean" && typeof addEventListener === "function" && typeof removeEventListener === "function";
}

/** @throws ConvolutionError `unknown-option`, `unknown-value` */
export function checkedRunOptions(given: unknown): CheckedRunOptions {
  if (given === undefined) return { target: undefined, signal: undefined, onProgress: undefined };
  checkOptionNames("runAsync", given, ["target", "signal", "onProgress"]);
  const { target, signal, onProgress } = given as Record<string, unknown>;
  if (signal !== undefined && !isSignal(signal)) refuse("signal", signal, "an AbortSignal");
  if (onProgress !== undefined && typeof onProgress !== "function") refuse("onProgress", onProgress, "a function of the progress, 0…1");
  return { target, signal: signal as AbortSignal | undefined, onProgress: onProgress as CheckedRunOptions["onProgress"] };
}
