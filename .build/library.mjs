/** Makes the library's part of dist/: minified modules by esbuild, side by side in one folder, and declarations by tsc. */
import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readFileSync, readdirSync, writeFileSync } from "node:fs";
import { basename, dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "esbuild";

const root = join(dirname(fileURLToPath(import.meta.url)), "..");

/** Where the bundler's account of the last build is kept: which module took how many bytes of which file. */
const accountFile = join(root, "node_modules", ".cache", "tapwise", "dist.json");

/** Modules that are files of their own in dist/ because somebody loads them by name: the public faces and the worker. */
const named = { index: "src/index.ts", measure: "src/measure/index.ts", worker: "src/runtime/workers/worker.ts" };

/** Cores that a default page does not load: all but the SIMD one, which is part of the library. */
function otherCores() {
  const targets = readdirSync(join(root, "src", "generated")).filter((name) => name.endsWith(".ts") && !["simd.ts", "debug.ts", "record.ts"].includes(name));
  return Object.fromEntries(targets.map((name) => [`core-${basename(name, ".ts")}`, `src/generated/${name}`]));
}

function emitDeclarations() {
  const { status } = spawnSync(process.execPath, [join(root, "node_modules/typescript/bin/tsc"), "-p", "tsconfig.build.json"], { cwd: root, stdio: "inherit" });
  if (status !== 0) throw new Error("The library does not compile.");
}

/**
 * One folder for all: the literal `new URL("./worker.js", import.meta.url)` is left as it is by bundlers, and so must be right
 * from whichever file its module ends up in.
 */
export async function buildLibrary() {
  emitDeclarations();
  const entryPoints = { ...Object.fromEntries(Object.entries(named).filter(([, path]) => existsSync(join(root, path)))), ...otherCores() };
  const { metafile } = await build({
    absWorkingDir: root,
    entryPoints,
    outdir: join(root, "dist"),
    bundle: true,
    splitting: true,
    chunkNames: "shared-[hash]",
    format: "esm",
    target: "es2022",
    minify: true,
    legalComments: "none",
    metafile: true,
    logLevel: "warning",
  });
  mkdirSync(dirname(accountFile), { recursive: true });
  writeFileSync(accountFile, JSON.stringify(metafile));
}

/** What the bundler tells of each file of dist/: `inputs` with their bytes, `imports`. By path from the root. */
export function filesOfLibrary() {
  return JSON.parse(readFileSync(accountFile, "utf8")).outputs;
}
