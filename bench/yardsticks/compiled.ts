import { spawnSync } from "node:child_process";
import { createHash } from "node:crypto";
import { existsSync, mkdirSync, renameSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { firstLineOf } from "../host.js";

const compiler = "gcc";
const sources = fileURLToPath(new URL(".", import.meta.url));
const binaries = fileURLToPath(new URL("../out/yardsticks/", import.meta.url));

export const gccVersion = (): string | undefined => firstLineOf(compiler, ["--version"]);

/** The text that the compiler sees, headers and constants put in. */
function preprocessed(parameters: readonly string[]): string {
  const { status, stdout, stderr } = spawnSync(compiler, ["-E", "-P", ...parameters], { encoding: "utf8", maxBuffer: 1 << 28 });
  if (status !== 0) throw new Error(`${compiler} does not read ${parameters.join(" ")}:\n${stderr}`);
  return stdout;
}

/**
 * Compiles bench/yardsticks/<source>.c, or finds what was compiled before from the same text with the same flags: many forms
 * with constant taps take gcc a while.
 *
 * @returns the path of the program
 */
export function compiled(source: string, flags: readonly string[], constants: Record<string, number>, libraries: readonly string[] = []): string {
  const path = join(sources, `${source}.c`);
  const defines = Object.entries(constants).map(([name, value]) => `-D${name}=${value}`);
  const parameters = ["-O3", ...flags, ...defines, path, ...libraries.map((library) => `-l${library}`)];
  const print = createHash("sha256")
    .update([gccVersion(), ...parameters, preprocessed(parameters)].join("\n"))
    .digest("hex");
  const binary = join(binaries, `${source}-${print.slice(0, 16)}`);
  if (existsSync(binary)) return binary;
  mkdirSync(binaries, { recursive: true });
  const unfinished = `${binary}.${process.pid}`;
  const { status, stderr } = spawnSync(compiler, [...parameters, "-o", unfinished], { encoding: "utf8" });
  if (status !== 0) throw new Error(`${compiler} does not compile ${source}.c:\n${stderr}`);
  renameSync(unfinished, binary);
  return binary;
}

/** Whether a program that includes this header and links this library compiles. */
export function hasLibrary(header: string, library: string): boolean {
  const { status } = spawnSync(compiler, ["-x", "c", "-", "-o", "/dev/null", `-l${library}`], {
    input: `#include <${header}>\nint main(void) { return 0; }\n`,
  });
  return status === 0;
}
