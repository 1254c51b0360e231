import { readFileSync } from "node:fs";
import { arch, cpus, loadavg, platform } from "node:os";

/** Where and when figures were measured. */
export interface Machine {
  processor: string;
  runtime: string;
  packageVersion: string;
  /** What else the machine had to do, in a sentence, where it had more to do than it has cores. */
  busy?: string;
  /** ISO 8601, UTC, to the minute. */
  date: string;
}

export function thisMachine(): Machine {
  const processors = cpus();
  const load = loadavg()[0];
  const busy = `The machine was busy: ${load.toFixed(1)} tasks on average wanted its ${processors.length} cores, so times are longer than on an idle one.`;
  const manifest = JSON.parse(readFileSync(new URL("../../package.json", import.meta.url), "utf8")) as { version: string };
  return {
    processor: `${processors[0]?.model.trim() ?? "unknown"}, ${processors.length} logical ${processors.length === 1 ? "core" : "cores"}`,
    runtime: `Node ${process.versions.node} (V8 ${process.versions.v8}) on ${platform()} ${arch()}`,
    packageVersion: manifest.version,
    ...(load > processors.length && { busy }),
    date: `${new Date().toISOString().slice(0, 16).replace("T", " ")} UTC`,
  };
}
