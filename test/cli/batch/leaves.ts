import { mkdir, readdir, writeFile } from "node:fs/promises";
import { dirname, join } from "node:path";
import { patternedSamples, writePng } from "../pngFiles.js";

/** A small grey PNG; `seed` makes it another one. */
export function leaf(seed: number, width = 12, height = 10): Buffer {
  const samples = patternedSamples(width * height, 8).map((sample) => (sample + 37 * seed) & 255);
  return writePng({ width, height, bitDepth: 8, colorType: 0, samples });
}

/** Writes a different leaf under each name of a folder; folders in the names are made. */
export async function writeLeaves(folder: string, names: readonly string[]): Promise<void> {
  for (const [index, name] of names.entries()) {
    const path = join(folder, name);
    await mkdir(dirname(path), { recursive: true });
    await writeFile(path, leaf(index));
  }
}

/** Paths of all files below a folder, the hidden ones included. */
export async function filesBelow(folder: string): Promise<string[]> {
  const entries = await readdir(folder, { recursive: true, withFileTypes: true });
  return entries
    .filter((entry) => !entry.isDirectory())
    .map((entry) => join(entry.parentPath, entry.name).slice(folder.length + 1))
    .sort();
}
