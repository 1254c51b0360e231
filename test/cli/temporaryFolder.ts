import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach } from "vitest";

/** A folder of its own for each test of the file; `at` names a file in it. */
export function useTemporaryFolder(): { at(name?: string): string } {
  let folder = "";
  beforeEach(async () => {
    folder = await mkdtemp(join(tmpdir(), "tapwise-"));
  });
  afterEach(() => rm(folder, { recursive: true, force: true }));
  return { at: (name = "") => join(folder, name) };
}
