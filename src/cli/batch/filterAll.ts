import { dirname, join } from "node:path";
import { realpath } from "node:fs/promises";
import type { PlanArguments } from "../arguments.js";
import { encodePng } from "../encodePng.js";
import { asConvolutionError } from "../failure.js";
import { isForAllFiles, makeFolder, readInput, unwritable, writeOutput } from "../files.js";
import { readImage } from "../png.js";
import { rescalingNotes } from "../rescalingNotes.js";
import type { BatchAccount } from "./account.js";
import type { Filters } from "./filters.js";
import { isIn } from "./folders.js";
import { type Settings, writeRecord } from "./settings.js";
import type { Due } from "./survey.js";

/** What the images of a batch have in common. */
export interface BatchJob {
  input: string;
  output: string;
  force: boolean;
  settings: Settings;
  /** True where results that are there are not of these settings, or are to be made anew: the record is written before the first result. */
  startsAnew: boolean;
  options: PlanArguments;
  filters: Filters;
  signal: AbortSignal;
}

/** Filters images one after the other until all are done, the signal is aborted, or nothing can be written any more. */
export async function filterAll(
  due: readonly Due[],
  job: BatchJob,
  account: BatchAccount,
  onProgress: (imageCount: number, part: number) => void,
): Promise<void> {
  const output = new OutputFolder(job);
  const byteLength = due.reduce((sum, image) => sum + image.byteLength, 0);
  let doneByteLength = 0;
  for (const [index, image] of due.entries()) {
    if (job.signal.aborted) return account.interrupt(job.signal.reason);
    try {
      await filterOne(image, job, output, account);
    } catch (error) {
      if (job.signal.aborted) return account.interrupt(job.signal.reason);
      account.fail({ name: image.name, error: asConvolutionError(error) });
      if (isForAllFiles(error) || output.isClosed) return undefined;
    }
    doneByteLength += image.byteLength;
    onProgress(index + 1, doneByteLength / byteLength);
  }
}

async function filterOne({ name, replaces }: Due, { input, options, filters, signal }: BatchJob, output: OutputFolder, account: BatchAccount): Promise<void> {
  const start = performance.now();
  const source = readImage(await readInput(join(input, name)), name, options.light);
  const filter = filters.for(source.layout);
  const result = await filter.runAsync(source.raster, { signal });
  await output.write(name, encodePng(result, source.carried), replaces);
  const { sample } = source.layout;
  const notes = [...source.notes, ...rescalingNotes(sample, options.outputSample ?? sample, options.gain)];
  account.done(name, { result, explanation: filter.explanation, milliseconds: performance.now() - start, notes });
}

/** The folder of the results: made, with its record, when the first result is there to be written. */
class OutputFolder {
  readonly #job: BatchJob;
  /** Folders that are there and lie in no folder that is filtered. */
  readonly #ready = new Set<string>();
  #hasRecord: boolean;
  /** True when not even the record could be written: then no result can be. */
  isClosed = false;

  constructor(job: BatchJob) {
    this.#job = job;
    this.#hasRecord = !job.startsAnew;
  }

  async write(name: string, content: Uint8Array, replaces: boolean): Promise<void> {
    const path = join(this.#job.output, name);
    await this.#makeReady(dirname(path));
    if (!this.#hasRecord) await this.#writeRecord();
    await writeOutput(path, content, replaces);
  }

  async #writeRecord(): Promise<void> {
    const { output, settings, force } = this.#job;
    this.isClosed = true;
    await writeRecord(output, settings, force);
    this.isClosed = false;
    this.#hasRecord = true;
  }

  async #makeReady(folder: string): Promise<void> {
    if (this.#ready.has(folder)) return;
    await makeFolder(folder);
    // A link among the folders of results may lead into those of the images.
    if (await isIn(await realpath(folder), this.#job.input)) throw unwritable(folder, `it lies in ${this.#job.input}`);
    this.#ready.add(folder);
  }
}
