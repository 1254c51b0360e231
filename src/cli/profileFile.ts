import { type FileHandle, open } from "node:fs/promises";
import { ConvolutionError, type HardwareProfile } from "../index.js";
import { unreadable } from "./files.js";

/** A measured profile takes some kilobytes; what is larger than this is something else, and is not parsed. */
const mostBytes = 1_000_000;

const expected = 'a profile as "tapwise measure --profile file.json" writes it';

/**
 * Reads a measured profile. What is in it is checked by the engine that takes it.
 *
 * @throws ConvolutionError `file-unreadable`; `invalid-profile` where the file is larger than 1 MB or no JSON object
 */
export async function readProfile(path: string): Promise<HardwareProfile> {
  const content = parse(await readShortFile(path), path);
  if (typeof content !== "object" || content === null || Array.isArray(content)) throw noProfile(path, "it is no JSON object", content);
  return content as HardwareProfile;
}

async function readShortFile(path: string): Promise<string> {
  const handle = await open(path).catch((error: unknown) => {
    throw unreadable(path, error);
  });
  try {
    return new TextDecoder().decode(await readUpTo(handle, mostBytes, path));
  } finally {
    await handle.close();
  }
}

/** Counts what comes instead of asking how much there is: a device or a pipe tells nothing. */
async function readUpTo(handle: FileHandle, byteLimit: number, path: string): Promise<Uint8Array> {
  const bytes = Buffer.alloc(byteLimit + 1);
  let byteLength = 0;
  for (;;) {
    const { bytesRead } = await handle.read(bytes, byteLength, bytes.length - byteLength).catch((error: unknown) => {
      throw unreadable(path, error);
    });
    byteLength += bytesRead;
    if (byteLength > byteLimit) throw noProfile(path, `it is larger than ${byteLimit} bytes`, `more than ${byteLimit} bytes`);
    if (bytesRead === 0) return bytes.subarray(0, byteLength);
  }
}

function parse(text: string, path: string): unknown {
  try {
    return JSON.parse(text);
  } catch (error) {
    throw noProfile(path, error instanceof Error ? error.message : "it is not JSON", text.slice(0, 80), error);
  }
}

function noProfile(path: string, reason: string, received: unknown, cause?: unknown): ConvolutionError {
  return new ConvolutionError("invalid-profile", `${path} does not hold a profile: ${reason}. Needed: ${expected}.`, { expected, received, cause });
}
