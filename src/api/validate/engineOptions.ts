import { ConvolutionError, shown } from "../../errors.js";
import { checkedNumber, checkOptionNames, chosenWord } from "../../kernels/options.js";
import { mostBytes, pageBytes } from "../../runtime/memory.js";
import type { Build, EngineOptions, HardwareProfile } from "../../types.js";
import { builds, checkedProfile } from "./profile.js";

/** Checked options of `createEngine`. */
export interface CheckedEngineOptions {
  build: Build | "auto";
  memoryLimit: number;
  profile: HardwareProfile | undefined;
  module: WebAssembly.Module | undefined;
  threads: number;
  createWorker: EngineOptions["createWorker"];
}

/** More threads than this are refused: no image has work for them, and each takes memory. */
const mostThreads = 64;

/** A whole number of threads. */
function checkedThreads(value: unknown): number {
  if (value === undefined) return 1;
  if (Number.isInteger(value) && (value as number) >= 1 && (value as number) <= mostThreads) return value as number;
  const expected = `a whole number 1…${mostThreads}`;
  const message = `createEngine: threads is ${shown(value)}. Needed: ${expected}, the calling thread included. Use navigator.hardwareConcurrency or less.`;
  throw new ConvolutionError("invalid-number", message, { expected, received: value });
}

function checkedCreateWorker(value: unknown): EngineOptions["createWorker"] {
  if (value === undefined || typeof value === "function") return value as EngineOptions["createWorker"];
  const message = `createEngine: createWorker is ${typeof value}. Needed: a function that returns a new Worker of this package's worker script.`;
  throw new ConvolutionError("unknown-value", message, { expected: "a function", received: typeof value });
}

/** @throws ConvolutionError `unknown-option`, `unknown-value`, `invalid-number`, `invalid-profile` */
export function checkedEngineOptions(given: unknown): CheckedEngineOptions {
  if (given !== undefined) checkOptionNames("createEngine", given, ["build", "profile", "memoryLimit", "module", "threads", "createWorker"]);
  const options = (given ?? {}) as Record<string, unknown>;
  const build = options["build"] ?? "auto";
  const limit = { what: `a number of bytes ${pageBytes}…${mostBytes}`, least: pageBytes, most: mostBytes };
  const { module } = options;
  if (module !== undefined && Object.prototype.toString.call(module) !== "[object WebAssembly.Module]") {
    const message = `createEngine: module is ${typeof module}. It must be a compiled WebAssembly.Module of this package's core.`;
    throw new ConvolutionError("unknown-value", message, { expected: "a WebAssembly.Module", received: typeof module });
  }
  return {
    build: chosenWord("createEngine", "build", build, ["auto", ...builds]),
    memoryLimit: options["memoryLimit"] === undefined ? mostBytes : checkedNumber("createEngine", "memoryLimit", options["memoryLimit"], limit),
    profile: options["profile"] === undefined ? undefined : checkedProfile(options["profile"]),
    module: module as WebAssembly.Module | undefined,
    threads: checkedThreads(options["threads"]),
    createWorker: checkedCreateWorker(options["createWorker"]),
  };
}
