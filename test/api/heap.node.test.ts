import { execFileSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { expect, test } from "vitest";

const methods = ["direct", "separable", "running-sum", "fft"];

/** What a script of this folder prints, run in a process of its own. */
function printedBy(script: string, method: string, ...options: string[]): string {
  const path = fileURLToPath(new URL(script, import.meta.url));
  return execFileSync(process.execPath, ["--expose-gc", ...options, "--import", "tsx", path, method], { encoding: "utf8" });
}

test.each(methods)("%s: 100,000 runs of 64 × 64 into a target grow the heap by less than 64 kB", (method) => {
  expect(Number(printedBy("heapGrowth.ts", method))).toBeLessThan(64_000);
});

test.each(methods)("%s: a frame leaves no garbage, whether its rasters are the same, new ones of the same arrays, or views", (method) => {
  const garbage = JSON.parse(printedBy("frameGarbage.ts", method, "--min-semi-space-size=64", "--max-semi-space-size=64")) as [string, number][];
  expect(garbage).toHaveLength(4);
  // The smallest object, a number in a box, takes 12 bytes: less than 4 a frame are none, and what the interval itself takes.
  expect(garbage.filter(([, bytes]) => bytes >= 4)).toEqual([]);
});
