import { readFileSync } from "node:fs";
import { arch, cpus, platform } from "node:os";

/** Where and when figures were measured. */
export interface Machine {
  processor: string;
  runtime: string;
  packageVersion: string;
  /** ISO 8601, UTC, to the minute. */
  date: string;
}

export function thisMachine(): Machine {
  const processors = cpus();
  const manifest = JSON.parse(readFileSync(new URL("../../package.json", import.meta.url), "utf8")) as { version: string };
  return {
    processor: `${processors[0]?.model.trim() ?? "unknown"}, ${processors.length} logical ${processors.length === 1 ? "core" : "cores"}`,
    runtime: `Node ${process.versions.node} (V8 ${process.versions.v8}) on ${platform()} ${arch()}`,
    packageVersion: manifest.version,
    date: `${new Date().toISOString().slice(0, 16).replace("T", " ")} UTC`,
  };
}
