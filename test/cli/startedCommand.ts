import { type ChildProcess, spawn } from "node:child_process";
import { fileURLToPath } from "node:url";

export interface StartedCommand {
  child: ChildProcess;
  /** What it wrote and how it ended. */
  ended: Promise<{ exitCode: number | null; stdout: string; stderr: string }>;
}

/** Starts a command in a process of its own, which can be interrupted. */
export function startTapwise(...argv: string[]): StartedCommand {
  const entry = fileURLToPath(new URL("../../src/cli/tapwise.ts", import.meta.url));
  const child = spawn(process.execPath, ["--import", "tsx", entry, ...argv], { stdio: ["ignore", "pipe", "pipe"] });
  const written = { stdout: "", stderr: "" };
  child.stdout.on("data", (text) => (written.stdout += String(text)));
  child.stderr.on("data", (text) => (written.stderr += String(text)));
  const ended = new Promise<{ exitCode: number | null; stdout: string; stderr: string }>((resolve) =>
    child.once("close", (exitCode) => resolve({ exitCode, ...written })),
  );
  return { child, ended };
}
