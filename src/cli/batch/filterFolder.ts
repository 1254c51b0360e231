import { prepareOptionsOf, type PlanArguments } from "../arguments.js";
import { makeEngine } from "../engineArguments.js";
import { interruptibly } from "../interruption.js";
import { kernelOf } from "../kernelArgument.js";
import type { ReadKernel } from "../kernelImage.js";
import type { Streams } from "../program.js";
import { showProgress } from "../progress.js";
import type { Report } from "../report.js";
import { BatchAccount } from "./account.js";
import { filterAll } from "./filterAll.js";
import { Filters } from "./filters.js";
import { findImages } from "./findImages.js";
import { checkFolders } from "./folders.js";
import { otherSettings, readBefore, settingsOf } from "./settings.js";
import { type Survey, survey } from "./survey.js";

/** Folders of a batch, and whether results that are there are made anew. */
interface Batch {
  input: string;
  output: string;
  force: boolean;
}

/**
 * Filters the PNG files of a folder, and of those below it, into another folder. An image that cannot be done is told at the end and stops
 * no other; results that are there and newer than their images are not made again.
 *
 * @throws ConvolutionError `usage` (one folder in the other), `file-exists` (results of other settings), those of the kernel and the engine
 */
export async function filterFolder(batch: Batch, options: PlanArguments, streams: Streams): Promise<Report> {
  const read = await kernelOf(options);
  await checkFolders(batch.input, batch.output);
  return interruptibly((signal) => filterFound(batch, read, options, streams, signal));
}

async function filterFound(batch: Batch, { kernel, notes }: ReadKernel, options: PlanArguments, streams: Streams, signal: AbortSignal): Promise<Report> {
  const { input, output, force } = batch;
  const settings = settingsOf(options.kernel, kernel, prepareOptionsOf(options));
  const account = new BatchAccount(input, output);
  notes.forEach((note) => account.note(note));
  const found = await findImages(input, signal);
  const before = await readBefore(output, settings);
  const surveyed = await survey(found.images, output, before, force);
  const hasResults = surveyed.done.length > 0 || surveyed.due.some(({ replaces }) => replaces);
  if (before.otherKernel !== undefined && hasResults && !force) throw otherSettings(output, settings, before.otherKernel);
  account.begin(found, surveyed);
  if (surveyed.due.length === 0) return account.report();
  const { engine, notes: engineNotes } = await makeEngine(options, options.profile);
  engineNotes.forEach((note) => account.note(note));
  const progress = showProgress(streams, wordsOf(0, surveyed));
  try {
    const job = { ...batch, settings, options, filters: new Filters(engine, kernel, settings.options), signal };
    await filterAll(surveyed.due, { ...job, startsAnew: force || before.since === Infinity || before.otherKernel !== undefined }, account, (index, part) =>
      progress.reach(part, wordsOf(index, surveyed)),
    );
  } finally {
    progress.end();
    engine.dispose();
  }
  return account.report();
}

function wordsOf(index: number, { due }: Survey): string {
  return `${index} of ${due.length} images`;
}
