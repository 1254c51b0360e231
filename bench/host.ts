import { execFileSync, spawnSync } from "node:child_process";
import { cpus } from "node:os";

/** Where and with what something was measured. */
export interface Host {
  processor: string;
  /** The core that everything was pinned to, or why nothing was. */
  core: string;
  /** Runtime and yardsticks by name. */
  versions: Record<string, string>;
  commit: string;
  /** True where tracked files differ from the commit. */
  changed: boolean;
  date: string;
}

/** What a command prints on its first line; nothing where it is missing or fails. */
export function firstLineOf(command: string, parameters: readonly string[]): string | undefined {
  const { status, stdout } = spawnSync(command, parameters, { encoding: "utf8" });
  return status === 0 ? stdout.split("\n")[0]!.trim() : undefined;
}

/**
 * Keeps this process, its threads and every process that it starts on one core, where `taskset` exists.
 * Contenders never run at the same time, so they do not disturb each other there.
 */
export function keepToOneCore(): string {
  const core = String(cpus().length - 1);
  try {
    execFileSync("taskset", ["--all-tasks", "--cpu-list", "--pid", core, String(process.pid)], { stdio: "ignore" });
    return core;
  } catch {
    return "not pinned: no taskset";
  }
}

export function describeHost(core: string, versions: Record<string, string | undefined> = {}): Host {
  const known = Object.entries(versions).filter((entry): entry is [string, string] => entry[1] !== undefined);
  return {
    processor: cpus()[0]?.model.trim() ?? "unknown",
    core,
    versions: { node: process.versions.node, v8: process.versions.v8, ...Object.fromEntries(known) },
    commit: firstLineOf("git", ["rev-parse", "HEAD"]) ?? "unknown",
    changed: firstLineOf("git", ["status", "--porcelain", "--untracked-files=no"]) !== "",
    date: new Date().toISOString(),
  };
}
