import { execFileSync, spawnSync } from "node:child_process";
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";

export const root: string = join(dirname(fileURLToPath(import.meta.url)), "..", "..");

/** The packed package, installed in an empty folder the way a user would. */
export interface Installation {
  folder: string;
  /** Paths inside the tarball, without its "package/". */
  files: string[];
  /** Runs a script as an ES module of that folder. */
  run(script: string): { status: number | null; stdout: string; stderr: string };
  remove(): void;
}

function npm(folder: string, ...parameters: string[]): string {
  return execFileSync("npm", parameters, { cwd: folder, encoding: "utf8", stdio: ["ignore", "pipe", "pipe"] });
}

/** Packs the repository's dist/ and installs it with the network switched off: a dependency to fetch would fail. */
export function installTarball(): Installation {
  const folder = mkdtempSync(join(tmpdir(), "tapwise-package-"));
  const [packed] = JSON.parse(npm(root, "pack", "--json", "--ignore-scripts", "--pack-destination", folder)) as [{ files: { path: string }[] }];
  const tarball = readdirSync(folder).find((name) => name.endsWith(".tgz"));
  if (tarball === undefined) throw new Error("npm pack made no tarball");
  writeFileSync(join(folder, "package.json"), '{ "name": "empty", "private": true, "type": "module" }\n');
  npm(folder, "install", "--offline", "--no-audit", "--no-fund", `./${tarball}`);
  return {
    folder,
    files: packed.files.map(({ path }) => path),
    run(script) {
      writeFileSync(join(folder, "script.js"), script);
      return spawnSync(process.execPath, ["script.js"], { cwd: folder, encoding: "utf8" });
    },
    remove: () => rmSync(folder, { recursive: true, force: true }),
  };
}
