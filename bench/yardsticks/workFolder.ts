import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { Samples } from "../../src/index.js";

/** A folder for what yardsticks read and write, removed when this process ends. */
export function makeWorkFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), "tapwise-yardsticks-"));
  process.once("exit", () => rmSync(folder, { recursive: true, force: true }));
  return folder;
}

let fileCount = 0;

/** A path in the folder that nothing else has. */
export function freshPath(folder: string, name: string): string {
  fileCount += 1;
  return join(folder, `${fileCount}-${name}`);
}

/** Writes arrays one after the other, byte by byte. */
export function writeSamples(folder: string, name: string, values: readonly Samples[]): string {
  const path = freshPath(folder, name);
  writeFileSync(path, Buffer.concat(values.map(({ buffer, byteOffset, byteLength }) => Buffer.from(buffer, byteOffset, byteLength))));
  return path;
}
