import { type Dirent, type Stats } from "node:fs";
import { readdir, stat } from "node:fs/promises";
import { join } from "node:path";
import { ConvolutionError } from "../../index.js";
import { unreadable } from "../files.js";

/** A PNG of the folder that is filtered. */
export interface FoundImage {
  /** Path below the folder. */
  name: string;
  byteLength: number;
  /** When it was last written, in milliseconds since 1970. */
  modified: number;
}

/** Something of a folder that could not be done. */
export interface Failure {
  name: string;
  error: ConvolutionError;
}

export interface Found {
  /** By name. */
  images: FoundImage[];
  failures: Failure[];
  /** Links to folders: they are not followed, so that links in a circle lead nowhere. */
  linkedFolders: string[];
}

/** Looks for PNG files in a folder and in those below; names that begin with a dot are hidden ones and left alone. */
export async function findImages(folder: string, signal: AbortSignal): Promise<Found> {
  const found: Found = { images: [], failures: [], linkedFolders: [] };
  const waiting = [""];
  for (let below = waiting.pop(); below !== undefined; below = waiting.pop()) {
    signal.throwIfAborted();
    for (const entry of await entriesOf(folder, below, found)) {
      if (entry.name.startsWith(".")) continue;
      const name = join(below, entry.name);
      if (entry.isDirectory()) waiting.push(name);
      else await look(folder, name, entry, found);
    }
  }
  for (const list of [found.images, found.failures]) list.sort((a, b) => (a.name < b.name ? -1 : 1));
  found.linkedFolders.sort();
  return found;
}

async function entriesOf(folder: string, below: string, { failures }: Found): Promise<Dirent[]> {
  try {
    return await readdir(join(folder, below), { withFileTypes: true });
  } catch (error) {
    if (below === "") throw unreadable(folder, error);
    failures.push({ name: below, error: unreadable(join(folder, below), error) });
    return [];
  }
}

async function look(folder: string, name: string, entry: Dirent, { images, failures, linkedFolders }: Found): Promise<void> {
  const isNamedPng = /\.png$/i.test(name);
  if (!isNamedPng && !entry.isSymbolicLink()) return;
  const path = join(folder, name);
  let status: Stats;
  try {
    status = await stat(path);
  } catch (error) {
    if (isNamedPng) failures.push({ name, error: unreadable(path, error) });
    return;
  }
  if (status.isDirectory()) linkedFolders.push(name);
  else if (isNamedPng && status.isFile()) images.push({ name, byteLength: status.size, modified: status.mtimeMs });
  else if (isNamedPng) failures.push({ name, error: unreadable(path, new Error("it is not a plain file")) });
}
