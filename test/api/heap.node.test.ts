import { execFileSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { expect, test } from "vitest";

const script = fileURLToPath(new URL("heapGrowth.ts", import.meta.url));

test.each(["direct", "separable", "running-sum", "fft"])("%s: 100,000 runs of 64 × 64 into a target grow the heap by less than 64 kB", (method) => {
  const printed = execFileSync(process.execPath, ["--expose-gc", "--import", "tsx", script, method], { encoding: "utf8" });
  expect(Number(printed)).toBeLessThan(64_000);
});
