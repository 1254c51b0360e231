import { createHash } from "node:crypto";
import { readFile, stat } from "node:fs/promises";
import { join } from "node:path";
import { ConvolutionError, type Kernel, type PrepareOptions } from "../../index.js";
import { writeOutput } from "../files.js";

/** Beside the results of a batch: what they were made with. */
const recordName = ".tapwise-batch.json";

/** What decides the results of a batch. */
export interface Settings {
  /** The kernel as it was written, for people. */
  kernel: string;
  options: PrepareOptions;
  /** Of the taps and the options. */
  digest: string;
}

/**
 * A digest of the kernel and the options stands for them. Threads, profile and build are left out: they change how a result is computed, and within its bound nothing else.
 */
export function settingsOf(text: string, { width, height, origin, taps }: Kernel, options: PrepareOptions): Settings {
  const digest = createHash("sha256").update(JSON.stringify({ width, height, origin, options })).update(taps).digest("hex");
  return { kernel: text, options, digest };
}

/** What is known of results that are there. */
export interface Before {
  /** From when on results were made with these settings, in milliseconds since 1970: when the record was written. */
  since: number;
  /** True where what is older may be replaced: `--force` was given when the record was written. */
  replaces: boolean;
  /** The kernel of other settings that results were made with. */
  otherKernel?: string;
}

/** Nothing is known: whatever is there was there before. */
const unknown: Before = { since: Infinity, replaces: false };

/** Reads what the results in a folder were made with. */
export async function readBefore(folder: string, { digest }: Settings): Promise<Before> {
  const path = join(folder, recordName);
  try {
    const { mtimeMs: since } = await stat(path);
    const record = JSON.parse(await readFile(path, "utf8")) as { digest?: unknown; replaces?: unknown; kernel?: unknown };
    if (record.digest === digest) return { since, replaces: record.replaces === true };
    return { since, replaces: false, otherKernel: String(record.kernel) };
  } catch {
    return unknown;
  }
}

/** Writes what results are made with from now on. With `replaces`, older ones may be replaced, also by a later command that goes on. */
export async function writeRecord(folder: string, settings: Settings, replaces: boolean): Promise<void> {
  const about = "What the images of this folder were filtered with. tapwise reads it to go on where it stopped.";
  await writeOutput(join(folder, recordName), Buffer.from(`${JSON.stringify({ about, ...settings, replaces }, null, 2)}\n`), true);
}

/** Results of other settings are not mixed with those of these. */
export function otherSettings(folder: string, { kernel }: Settings, otherKernel: string): ConvolutionError {
  const message = `${folder} holds results of other settings (kernel "${otherKernel}"; see ${join(folder, recordName)}). Choose another folder, or add --force to filter all anew.`;
  return new ConvolutionError("file-exists", message, { expected: `results of kernel "${kernel}", or --force`, received: otherKernel });
}
