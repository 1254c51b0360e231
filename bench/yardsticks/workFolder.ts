import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";

/** A folder for what yardsticks read and write, removed when this process ends. */
export function makeWorkFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), "tapwise-yardsticks-"));
  process.once("exit", () => rmSync(folder, { recursive: true, force: true }));
  return folder;
}

export function writeFloats(folder: string, name: string, values: readonly Float32Array[]): string {
  const path = join(folder, name);
  writeFileSync(path, Buffer.concat(values.map(({ buffer, byteOffset, byteLength }) => Buffer.from(buffer, byteOffset, byteLength))));
  return path;
}
