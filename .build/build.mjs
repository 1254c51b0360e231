/** Makes dist/ anew: the core, the library with its declarations, the command line. */
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { buildCommandLine } from "./commandLine.mjs";
import { buildCore } from "./core.mjs";
import { fingerprintOf } from "./fingerprint.mjs";
import { buildLibrary } from "./library.mjs";

const root = join(dirname(fileURLToPath(import.meta.url)), "..");
const stampFile = join(root, "node_modules", ".cache", "tapwise", "dist");

function isFresh(stamp) {
  return existsSync(join(root, "dist", "cli", "tapwise.js")) && existsSync(stampFile) && readFileSync(stampFile, "utf8") === stamp;
}

/** With `onlyIfStale` a dist/ that was made from the same sources is kept. */
export async function buildPackage({ onlyIfStale = false } = {}) {
  await buildCore();
  const stamp = fingerprintOf(root, ["src", ".build"], ["package.json", "tsconfig.json", "tsconfig.build.json", "package-lock.json"]);
  if (onlyIfStale && isFresh(stamp)) return;
  rmSync(join(root, "dist"), { recursive: true, force: true });
  await buildLibrary();
  await buildCommandLine();
  mkdirSync(dirname(stampFile), { recursive: true });
  writeFileSync(stampFile, stamp);
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  await buildPackage().catch((error) => {
    console.error(error instanceof Error ? error.message : error);
    process.exitCode = 1;
  });
}
