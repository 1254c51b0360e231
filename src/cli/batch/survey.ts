import type { Stats } from "node:fs";
import { lstat } from "node:fs/promises";
import { join } from "node:path";
import { ConvolutionError } from "../../index.js";
import { fileExists, unwritable } from "../files.js";
import type { Failure, FoundImage } from "./findImages.js";
import type { Before } from "./settings.js";

/** An image that is to be filtered; its result may take the place of an older one or not. */
export interface Due extends FoundImage {
  replaces: boolean;
}

/** What is to be done with the images of a folder. */
export interface Survey {
  due: Due[];
  /** Results of these settings are there and newer than their images. */
  done: string[];
  /** Results are there and newer than their images; what they were made with is not known. */
  kept: string[];
  failures: Failure[];
}

/**
 * Looks at what is there already. Results are written whole or not at all, so one that is there is complete.
 *
 *     result is            newer than its image    older than its image
 *     of these settings    done                    due, replaces it
 *     older than these     kept, or due where --force was given
 */
export async function survey(images: readonly FoundImage[], output: string, before: Before, force: boolean): Promise<Survey> {
  const found: Survey = { due: [], done: [], kept: [], failures: [] };
  for (const image of images) {
    const { name, modified } = image;
    try {
      const written = await resultTime(join(output, name));
      const isOurs = written !== undefined && written >= before.since;
      if (written === undefined) found.due.push({ ...image, replaces: false });
      else if (force || (isOurs ? written < modified : before.replaces)) found.due.push({ ...image, replaces: true });
      else if (written < modified) throw fileExists(join(output, name));
      else (isOurs ? found.done : found.kept).push(name);
    } catch (error) {
      if (!(error instanceof ConvolutionError)) throw error;
      found.failures.push({ name, error });
    }
  }
  return found;
}

/** When a result was written, in milliseconds since 1970, or undefined where there is none. */
async function resultTime(path: string): Promise<number | undefined> {
  const status = await statusOf(path);
  if (status === undefined) return undefined;
  // A link might lead back to an image that is filtered.
  if (!status.isFile()) throw unwritable(path, status.isSymbolicLink() ? "it is a link" : "it is not a plain file");
  return status.mtimeMs;
}

/** A part of the path that is missing, or is a file, is found out when it is written. */
async function statusOf(path: string): Promise<Stats | undefined> {
  return lstat(path).catch(() => undefined);
}
