import { ConvolutionError } from "../../errors.js";
import { checkedNumber, checkOptionNames, chosenWord } from "../../kernels/options.js";
import { operationNames } from "../../planning/cost.js";
import { mostBytes, pageBytes } from "../../runtime/memory.js";
import type { Build, HardwareProfile } from "../../types.js";

/** Checked options of `createEngine`. */
export interface CheckedEngineOptions {
  build: Build | "auto";
  memoryLimit: number;
  profile: HardwareProfile | undefined;
  module: WebAssembly.Module | undefined;
}

const notYet: Record<string, string> = {
  threads: "This release runs on the calling thread. Leave threads out.",
  createWorker: "This release runs on the calling thread. Leave createWorker out.",
};

function refuseNotYet(options: Record<string, unknown>): void {
  for (const [name, advice] of Object.entries(notYet)) {
    if (options[name] === undefined) continue;
    throw new ConvolutionError("not-supported", `createEngine: option ${name} (${String(options[name])}) is not supported. ${advice}`, {
      expected: "no such option",
      received: options[name],
    });
  }
  if (options["build"] !== "relaxed-simd") return;
  const message = 'createEngine: build "relaxed-simd" is not supported. Use "auto", "simd" or "scalar".';
  throw new ConvolutionError("not-supported", message, { expected: ["auto", "simd", "scalar"], received: "relaxed-simd" });
}

/** @throws ConvolutionError `unknown-option`, `unknown-value`, `invalid-number`, `invalid-profile`, `not-supported` */
export function checkedEngineOptions(given: unknown): CheckedEngineOptions {
  if (given !== undefined) checkOptionNames("createEngine", given, ["build", "profile", "memoryLimit", "module", "threads", "createWorker"]);
  const options = (given ?? {}) as Record<string, unknown>;
  refuseNotYet(options);
  const build = options["build"] ?? "auto";
  const limit = { what: `a number of bytes ${pageBytes}…${mostBytes}`, least: pageBytes, most: mostBytes };
  const { module } = options;
  if (module !== undefined && Object.prototype.toString.call(module) !== "[object WebAssembly.Module]") {
    const message = `createEngine: module is ${typeof module}. It must be a compiled WebAssembly.Module of this package's core.`;
    throw new ConvolutionError("unknown-value", message, { expected: "a WebAssembly.Module", received: typeof module });
  }
  return {
    build: chosenWord("createEngine", "build", build, ["auto", "simd", "scalar"]),
    memoryLimit: options["memoryLimit"] === undefined ? mostBytes : checkedNumber("createEngine", "memoryLimit", options["memoryLimit"], limit),
    profile: options["profile"] === undefined ? undefined : checkedProfile(options["profile"]),
    module: module as WebAssembly.Module | undefined,
  };
}

function refuseProfile(found: string, expected: string): never {
  const message = `createEngine: profile: ${found}. Needed: ${expected}. Leave profile out to use the shipped one.`;
  throw new ConvolutionError("invalid-profile", message, { expected, received: found });
}

/** A profile as plain data: version, build and a finite price, 0 or more, for every operation. */
function checkedProfile(given: unknown): HardwareProfile {
  if (typeof given !== "object" || given === null) refuseProfile(`it is ${given === null ? "null" : typeof given}`, "an object");
  const { version, host, build, date, nanoseconds } = given as Partial<Record<keyof HardwareProfile, unknown>>;
  if (version !== 1) refuseProfile(`version is ${String(version)}`, "version 1");
  if (build !== "simd" && build !== "scalar") refuseProfile(`build is ${String(build)}`, '"simd" or "scalar"');
  if (typeof nanoseconds !== "object" || nanoseconds === null) refuseProfile("nanoseconds is missing", "nanoseconds by operation");
  const prices: Record<string, number> = {};
  for (const name of operationNames) {
    const price = Object.hasOwn(nanoseconds, name) ? (nanoseconds as Record<string, unknown>)[name] : undefined;
    if (typeof price !== "number" || !Number.isFinite(price) || price < 0)
      refuseProfile(`nanoseconds.${name} is ${String(price)}`, "a finite number, 0 or more");
    prices[name] = price;
  }
  return { version, host: String(host), build, date: String(date), nanoseconds: prices };
}

/** @throws ConvolutionError `invalid-profile` where it was measured with another build */
export function profileForBuild(profile: HardwareProfile, build: Build): HardwareProfile {
  if (profile.build !== build) refuseProfile(`it was measured with the ${profile.build} build`, `a profile of the ${build} build`);
  return profile;
}
