import { createHash } from "node:crypto";
import { readFileSync, readdirSync } from "node:fs";
import { join } from "node:path";

/** A hash of the names and contents of all files in `folders` and of `files`, both relative to `root`. */
export function fingerprintOf(root, folders, files) {
  const inside = folders.flatMap((folder) =>
    readdirSync(join(root, folder), { recursive: true, withFileTypes: true })
      .filter((entry) => entry.isFile())
      .map((entry) => join(entry.parentPath, entry.name))
      .sort(),
  );
  const hash = createHash("sha256");
  for (const path of [...inside, ...files.map((name) => join(root, name))]) {
    hash.update(path.slice(root.length)).update("\0").update(readFileSync(path)).update("\0");
  }
  return hash.digest("hex").slice(0, 16);
}
