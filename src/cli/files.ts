import { randomBytes } from "node:crypto";
import type { Stats } from "node:fs";
import { chmod, mkdir, open, readFile, realpath, rename, stat, unlink } from "node:fs/promises";
import { dirname, join } from "node:path";
import { ConvolutionError } from "../index.js";
import { removeWhenInterrupted } from "./interruption.js";

/** @throws ConvolutionError `file-unreadable` */
export async function readInput(path: string): Promise<Uint8Array> {
  try {
    return await readFile(path);
  } catch (error) {
    throw unreadable(path, error);
  }
}

/** What reading a file came to. */
export function unreadable(path: string, cause: unknown): ConvolutionError {
  // What is no UTF-8 in a name comes as this character, and leads nowhere.
  const reason = path.includes("\uFFFD") ? `${reasonOf(cause)}, or its name is not in UTF-8` : reasonOf(cause);
  return new ConvolutionError("file-unreadable", `${path} cannot be read: ${reason}. Check the path and its permissions.`, {
    expected: "a readable file",
    received: codeOf(cause),
    cause,
  });
}

/**
 * Checks a place to write to before work is spent on what goes there.
 *
 * @throws ConvolutionError `file-exists` without `force`; `file-unwritable` where a folder or a device is in the way, or the folder is missing
 */
export async function checkOutput(path: string, force: boolean): Promise<void> {
  const folder = dirname(path);
  const folderStatus = await stat(folder).catch((error: unknown) => {
    throw unwritable(path, `folder ${folder}: ${reasonOf(error)}`, error);
  });
  if (!folderStatus.isDirectory()) throw unwritable(path, `${folder} is not a folder`);
  const status = await existing(path);
  if (status === undefined) return;
  if (!status.isFile()) throw unwritable(path, status.isDirectory() ? "it is a folder" : "it is not a plain file");
  if (!force) throw fileExists(path);
}

/** What a file that stands in the way comes to. */
export function fileExists(path: string): ConvolutionError {
  return new ConvolutionError("file-exists", `${path} exists and was left as it is. Choose another name, or add --force to replace it.`, {
    expected: "a name that is free, or --force",
    received: path,
  });
}

/**
 * Checks a place for a folder: one that is there, or a free name in one that is there.
 *
 * @throws ConvolutionError `file-unwritable`
 */
export async function checkPlaceForFolder(path: string): Promise<void> {
  const status = await existing(path);
  if (status === undefined) return checkOutput(path, false);
  if (!status.isDirectory()) throw unwritable(path, "it is not a folder");
}

/** Makes a folder and those above it, where they are missing. @throws ConvolutionError `file-unwritable` */
export async function makeFolder(path: string): Promise<void> {
  try {
    await mkdir(path, { recursive: true });
  } catch (error) {
    throw unwritable(path, codeOf(error) === "EEXIST" ? "it is not a folder" : reasonOf(error), error);
  }
}

/**
 * Writes a whole file or nothing: into a file of its own beside the target, which then takes the target's name in one step.
 * An error or an interruption (SIGINT, SIGTERM, SIGHUP) removes what was begun. A link is followed; a replaced file keeps its permissions.
 *
 * @throws ConvolutionError `file-exists`, `file-unwritable`
 */
export async function writeOutput(path: string, content: Uint8Array, force: boolean): Promise<void> {
  await checkOutput(path, force);
  const target = await realpath(path).catch(() => path);
  const begun = join(dirname(target), `.tapwise-${randomBytes(6).toString("hex")}.part`);
  const release = removeWhenInterrupted(begun);
  try {
    await writeDurably(begun, content);
    const replaced = await existing(target);
    if (replaced !== undefined) await chmod(begun, replaced.mode & 0o7777);
    await checkOutput(path, force);
    await rename(begun, target);
  } catch (error) {
    await unlink(begun).catch(() => undefined);
    throw error instanceof ConvolutionError ? error : unwritable(path, reasonOf(error), error);
  } finally {
    release();
  }
}

async function writeDurably(path: string, content: Uint8Array): Promise<void> {
  const handle = await open(path, "wx");
  try {
    await handle.writeFile(content);
    await handle.sync();
  } finally {
    await handle.close();
  }
}

async function existing(path: string): Promise<Stats | undefined> {
  return stat(path).catch((error: unknown) => {
    if (codeOf(error) === "ENOENT") return undefined;
    throw unwritable(path, reasonOf(error), error);
  });
}

/** True for an error of writing that every other file would meet as well. */
export function isForAllFiles(error: unknown): boolean {
  return error instanceof ConvolutionError && ["ENOSPC", "EDQUOT", "EROFS"].includes(codeOf(error.cause));
}

/** What writing a file came to. */
export function unwritable(path: string, reason: string, cause?: unknown): ConvolutionError {
  const advice = ["ENOSPC", "EDQUOT"].includes(codeOf(cause))
    ? "Make room there, or choose another place."
    : "Choose a place that exists and may be written to.";
  return new ConvolutionError("file-unwritable", `${path} cannot be written: ${reason}. ${advice}`, { expected: "a writable place", received: reason, cause });
}

/** What the system's error codes mean, in words; any other code is shown as it is. */
const reasonOfCode: Readonly<Record<string, string>> = {
  ENOENT: "no such file or folder",
  EACCES: "permission denied",
  EPERM: "not permitted",
  EISDIR: "it is a folder",
  ENOTDIR: "a part of the path is not a folder",
  ELOOP: "its links lead round in a circle",
  ENOSPC: "no space left on the device",
  EDQUOT: "the disk quota is used up",
  EROFS: "the file system is read-only",
  EFBIG: "the file would be too large",
  ENAMETOOLONG: "the name is too long",
  ERR_FS_FILE_TOO_LARGE: "it is larger than 2 GiB",
};

function reasonOf(error: unknown): string {
  const code = codeOf(error);
  return reasonOfCode[code] ?? code;
}

function codeOf(error: unknown): string {
  if (error instanceof Error && "code" in error && typeof error.code === "string") return error.code;
  return error instanceof Error ? error.message : String(error);
}
