import { spawn } from "node:child_process";
import { readdir, stat } from "node:fs/promises";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";
import { exitCodeOfSignal, interruptibly, removeWhenInterrupted } from "../../src/cli/interruption.js";
import { useTemporaryFolder } from "./temporaryFolder.js";

const { at } = useTemporaryFolder();
const byteLength = 2 ** 26;

/** A process that writes one file over and over, under work that is told of signals and goes on regardless. */
function startStubbornWork() {
  const source = (name: string): string => JSON.stringify(fileURLToPath(new URL(`../../src/cli/${name}.ts`, import.meta.url)));
  const script = `import { writeOutput } from ${source("files")};
    import { interruptibly } from ${source("interruption")};
    await interruptibly(async (signal) => {
      signal.addEventListener("abort", () => process.stdout.write("told"));
      for (;;) await writeOutput(${JSON.stringify(at("out.png"))}, Buffer.alloc(${byteLength}), true);
    });`;
  const child = spawn(process.execPath, ["--import", "tsx", "--input-type=module", "--eval", script], { stdio: ["ignore", "pipe", "inherit"] });
  const ended = new Promise<number | null>((resolve) => child.once("exit", (code) => resolve(code)));
  const told = new Promise<void>((resolve) => child.stdout.once("data", () => resolve()));
  return { child, ended, told };
}

async function untilBegun(): Promise<void> {
  while (!(await readdir(at())).some((name) => name.endsWith(".part"))) await new Promise((resolve) => setTimeout(resolve, 1));
}

describe("work that can be interrupted", () => {
  it("is told of the first signal; a second one ends the process at once and removes what was begun", async () => {
    const { child, ended, told } = startStubbornWork();
    await untilBegun();
    child.kill("SIGINT");
    await told;
    await untilBegun();
    child.kill("SIGINT");
    expect(await ended).toBe(130);
    expect((await readdir(at())).filter((name) => name !== "out.png")).toEqual([]);
    expect((await stat(at("out.png")).catch(() => ({ size: byteLength }))).size).toBe(byteLength);
  });

  it("hands on what the work gives or throws, and listens no longer", async () => {
    const release = removeWhenInterrupted(at("begun"));
    const listenerCount = process.listenerCount("SIGTERM");
    expect(await interruptibly(async () => 7)).toBe(7);
    await expect(interruptibly(() => Promise.reject(new Error("torn")))).rejects.toThrow("torn");
    expect(process.listenerCount("SIGTERM")).toBe(listenerCount);
    release();
    expect(process.listenerCount("SIGTERM")).toBe(listenerCount - 1);
  });

  // Source: POSIX.1-2017, <signal.h> and kill (numbers of SIGHUP, SIGINT, SIGTERM); 128 + number is common practice of shells.
  it.each([
    ["SIGHUP", 129],
    ["SIGINT", 130],
    ["SIGTERM", 143],
  ])("%s makes the exit code %d", (signal, exitCode) => expect(exitCodeOfSignal(signal)).toBe(exitCode));
});
