import type { Stats } from "node:fs";
import { realpath, stat } from "node:fs/promises";
import { basename, dirname, join, resolve } from "node:path";
import { ConvolutionError } from "../../index.js";
import { checkPlaceForFolder } from "../files.js";

/**
 * Checks that results of a batch cannot become its input: neither folder may be, or lie in, the other.
 *
 * @throws ConvolutionError `usage`; `file-unwritable` where the output is no folder, or lies in none
 */
export async function checkFolders(input: string, output: string): Promise<void> {
  await checkPlaceForFolder(output);
  const place = await realpath(output).catch(async () => join(await realpath(dirname(resolve(output))), basename(output)));
  const advice = "Choose a folder beside it, so that results are not filtered again.";
  if (await isIn(place, input)) throw refused(input, output, `${output} is ${input} or lies in it. ${advice}`);
  if (await isIn(await realpath(input), output)) throw refused(input, output, `${input} lies in ${output}. ${advice}`);
}

function refused(input: string, output: string, message: string): ConvolutionError {
  return new ConvolutionError("usage", message, { expected: "two folders, neither in the other", received: { input, output } });
}

/** True where `path`, free of links, is a folder or lies in it. Compares the folders themselves, not how their names are spelled. */
export async function isIn(path: string, folder: string): Promise<boolean> {
  const wanted = await statusOf(folder);
  if (wanted === undefined) return false;
  for (let at = path; ; at = dirname(at)) {
    const status = await statusOf(at);
    if (status?.dev === wanted.dev && status.ino === wanted.ino) return true;
    if (at === dirname(at)) return false;
  }
}

async function statusOf(path: string): Promise<Stats | undefined> {
  return stat(path).catch(() => undefined);
}
