import { readFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { expect, test } from "vitest";
import { faultOfCode } from "../../src/errors.js";

const readme = readFileSync(join(dirname(fileURLToPath(import.meta.url)), "..", "..", "README.md"), "utf8");

test.each(Object.entries(faultOfCode))("the README lists the error code %s with its fault, %s", (code, fault) => {
  const rows = readme.split("\n").filter((line) => line.startsWith("|") && line.includes(`\`${code}\``));
  expect(rows.length, `a table row of the README with \`${code}\``).toBeGreaterThan(0);
  expect(rows.some((row) => row.includes(fault))).toBe(true);
});
