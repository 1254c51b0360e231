import { mkdirSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { Worker } from "node:worker_threads";
import { buildSync } from "esbuild";

const root = join(dirname(fileURLToPath(import.meta.url)), "..", "..");

/** The worker's script in one file of JavaScript, made anew: threads of Node do not read TypeScript. */
function bundledScript(): string {
  const folder = join(root, "node_modules", ".cache", "tapwise", `worker-${process.pid}`);
  mkdirSync(folder, { recursive: true });
  const outfile = join(folder, "worker.mjs");
  buildSync({ entryPoints: [join(root, "src/runtime/workers/worker.ts")], bundle: true, format: "esm", target: "es2022", outfile, logLevel: "error" });
  return outfile;
}

let script: string | undefined;

/** `createWorker` for engines that are run from their sources in Node. */
export function nodeWorker(): Worker {
  script ??= bundledScript();
  return new Worker(script);
}
