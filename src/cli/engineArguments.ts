import { type Command, Option } from "commander";
import { type Build, ConvolutionError, type Engine, type EngineOptions, type HardwareProfile, createEngine } from "../index.js";
import { given } from "./given.js";
import { byteCount, refuseValue, wholeNumbers } from "./numbers.js";
import { readProfile } from "./profileFile.js";

/** What an engine is made of, as the parser hands it over. */
export interface EngineArguments {
  build?: Build | "auto";
  memoryLimit?: number;
  threads?: number;
}

/** Adds the options of {@link EngineArguments}. */
export function addEngineOptions(command: Command): Command {
  return command
    .addOption(new Option("--build <build>", "WebAssembly build of the engine (default: auto)").choices(["auto", "simd", "scalar", "relaxed-simd"]))
    .option("--threads <count>", "threads that a run may use; small images stay on one (default: 1)", readThreads)
    .option("--memory-limit <bytes>", "memory the engine may take, such as 256MiB", (text) => byteCount(text, "--memory-limit"));
}

function readThreads(text: string): number {
  const [threads] = wholeNumbers(text, 1, "--threads", "a whole number of threads");
  return threads! >= 1 ? threads! : refuseValue("--threads", text, "a whole number of threads");
}

/** An engine that somebody else disposes, and sentences about what it does not do as asked. */
export interface MadeEngine {
  engine: Engine;
  notes: string[];
}

export function engineOptionsOf({ build, memoryLimit, threads }: EngineArguments): EngineOptions {
  return given({ build, memoryLimit, threads });
}

/** Makes the engine that is meant; with the profile of a file where one is named. */
export async function makeEngine(options: EngineArguments, path?: string): Promise<MadeEngine> {
  const profile = path === undefined ? undefined : await readProfile(path);
  const engine = profile === undefined ? await createEngine(engineOptionsOf(options)) : await createEngineWith(profile, engineOptionsOf(options), path!);
  const notes = profile === undefined ? [] : adaptationsOf(profile, engine.profile).map((note) => `${path}: ${note}`);
  const { threads = 1 } = options;
  if (engine.threads < threads) notes.push(`Of ${threads} threads, ${engine.threads} could be had here.`);
  return { engine, notes };
}

async function createEngineWith(profile: HardwareProfile, options: EngineOptions, path: string): Promise<Engine> {
  try {
    return await createEngine({ ...options, profile });
  } catch (error) {
    if (!(error instanceof ConvolutionError) || error.code !== "invalid-profile") throw error;
    const { expected, received } = error;
    throw new ConvolutionError("invalid-profile", `${path}: ${error.message}`, { expected, received, cause: error });
  }
}

/** What the engine says about the profile that the file did not say. */
function adaptationsOf(read: HardwareProfile, used: HardwareProfile): string[] {
  return (used.notes ?? []).filter((note) => !(read.notes ?? []).includes(note));
}
