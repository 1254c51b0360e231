import { spawnSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import type { Kernel } from "../../src/index.js";
import { firstLineOf } from "../host.js";
import { factorsOf } from "./factors.js";
import { YardstickProcess } from "./process.js";
import { freshPath, writeSamples } from "./workFolder.js";

const compiler = "gcc";
export const flags = ["-O3", "-msse4.2"];

export const gccVersion = (): string | undefined => firstLineOf(compiler, ["--version"]);

/** Orders in which the loops of each source are written. */
export const formsOf = { direct: ["samples", "taps", "tap-rows"], separable: ["samples", "taps"] };
export type PlainLoops = keyof typeof formsOf;

/** Compiles the loops for that number of taps: constants to the compiler. */
function compile(folder: string, loops: PlainLoops, columns: number, rows: number): string {
  const source = fileURLToPath(new URL(`${loops}.c`, import.meta.url));
  const binary = freshPath(folder, `${loops}-${columns}-${rows}`);
  const { status, stderr } = spawnSync(compiler, [...flags, `-DTAP_COLUMNS=${columns}`, `-DTAP_ROWS=${rows}`, source, "-o", binary], { encoding: "utf8" });
  if (status !== 0) throw new Error(`${compiler} does not compile ${loops}.c:\n${stderr}`);
  return binary;
}

/** Starts plain loops over one-channel planes: replicate border, extent `same`. A separable kernel must be of unit gain. */
export function startPlainC(folder: string, loops: PlainLoops, kernel: Kernel, planes: readonly Float32Array[], width: number): YardstickProcess {
  const { width: m, height: n } = kernel;
  const { row, column } = factorsOf(kernel);
  // The loops lay taps on the image as they stand: reversed for a convolution.
  const taps = loops === "direct" ? kernel.taps.toReversed() : [...row.toReversed(), ...column.toReversed()];
  const parameters = [
    String(width),
    String(planes[0]!.length / width),
    String(planes.length),
    writeSamples(folder, "planes.f32", planes),
    writeSamples(folder, `${loops}-taps.f32`, [Float32Array.from(taps)]),
  ];
  return new YardstickProcess(compile(folder, loops, m, n), parameters, freshPath(folder, `${loops}-result.f32`));
}
