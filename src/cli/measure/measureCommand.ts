import { resolve } from "node:path";
import { type Channels, ConvolutionError, type Engine, type HardwareProfile, createEngine, delta } from "../../index.js";
import { type Crossover, type MeasureCrossoverOptions, measureCrossover, measureProfile } from "../../measure/index.js";
import { engineOptionsOf, makeEngine } from "../engineArguments.js";
import { checkOutput } from "../files.js";
import { given } from "../given.js";
import { interruptibly } from "../interruption.js";
import type { Streams } from "../program.js";
import { type Progress, showProgress } from "../progress.js";
import type { Report } from "../report.js";
import { findingsReport } from "./findingsReport.js";
import type { MeasureArguments } from "./measureArguments.js";

const defaultSeconds = 12;

/** What the profile gets of the time where crossings are measured as well: a sixth, and where time is short this much, half of it at most. */
const profileShare = 1 / 6;
const leastProfileSeconds = 0.5;

/** What was measured. */
export interface Measured {
  profile: HardwareProfile;
  crossover?: Crossover;
}

/**
 * Measures what operations cost here, and with these costs where methods cross; writes the files that are asked for.
 *
 * @throws ConvolutionError before anything is measured: `usage`, `file-exists`, `file-unwritable`, those of the images' layout and of the engine;
 * `interrupted`, after which nothing was written
 */
export async function measure(options: MeasureArguments, streams: Streams): Promise<Report> {
  checkUsage(options);
  const { profile, report, force } = options;
  for (const path of [profile, report]) if (path !== undefined) await checkOutput(path, force === true);
  const { engine, notes } = await makeEngine(options);
  const progress = showProgress(streams, "profile");
  try {
    checkQuestion(engine, options);
    const measured = await interruptibly((signal) => measureWith(engine, options, progress, signal));
    progress.end();
    return await findingsReport(measured, options, notes);
  } finally {
    progress.end();
    engine.dispose();
  }
}

async function measureWith(engine: Engine, options: MeasureArguments, progress: Progress, signal: AbortSignal): Promise<Measured> {
  const { seconds = options.crossover ? defaultSeconds : defaultSeconds * profileShare } = options;
  const share = options.crossover ? Math.max(profileShare, Math.min(0.5, leastProfileSeconds / seconds)) : 1;
  const profile = await measureProfile(engine, { milliseconds: 1000 * seconds * share, signal, onProgress: (part) => progress.reach(part * share, "profile") });
  if (!options.crossover) return { profile };
  const fitted = await createEngine({ ...engineOptionsOf(options), profile });
  try {
    const crossover = await measureCrossover(fitted, {
      ...questionOf(options),
      milliseconds: 1000 * seconds * (1 - share),
      signal,
      onProgress: (part, { rows }) => progress.reach(share + part * (1 - share), `crossings, ${rows.length} kernel sizes so far`),
    });
    return { profile, crossover };
  } finally {
    fitted.dispose();
  }
}

/** What is to be found out, with the defaults of the library. */
function questionOf({ size, channels, sample, kernels, border, sizes }: MeasureArguments): MeasureCrossoverOptions {
  const { width, height } = size ?? { width: 1920, height: 1080 };
  const separable = kernels === undefined ? undefined : kernels === "separable";
  return { width, height, ...given({ channels: channels && (Number(channels) as Channels), sample, separable, border, sizes }) };
}

/** The engine says what is wrong with a layout or a border before time is spent on measuring. */
function checkQuestion(engine: Engine, options: MeasureArguments): void {
  const { width, height, channels, sample, border } = questionOf(options);
  engine.explain(delta(), { width, height, ...given({ channels, sample }) }, given({ border }));
}

/** Options that ask about crossings. */
const crossoverOptions = ["report", "size", "channels", "sample", "kernels", "border", "sizes"] as const;

function checkUsage(options: MeasureArguments): void {
  const { crossover, profile, report } = options;
  const idle = crossover ? undefined : crossoverOptions.find((name) => options[name] !== undefined);
  if (idle !== undefined) throw wrong(`--${idle} is about crossings, which --no-crossover leaves out. Give one of the two.`, `--${idle} or --no-crossover`);
  if (profile !== undefined && report !== undefined && resolve(profile) === resolve(report))
    throw wrong(`--profile and --report both name ${profile}. Give two names.`, "two names");
}

function wrong(message: string, expected: string): ConvolutionError {
  return new ConvolutionError("usage", message, { expected, received: "both" });
}
