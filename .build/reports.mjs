import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";

const folder = join(dirname(fileURLToPath(import.meta.url)), "..", "node_modules", ".cache", "tapwise", "reports");

/** Where the report of a run is kept. */
export function reportFile(name) {
  mkdirSync(folder, { recursive: true });
  return join(folder, `${name}.json`);
}

export function clearReports() {
  rmSync(folder, { recursive: true, force: true });
}

/** Tests passed and failed over all reports; a test file that did not load counts as one failure. */
export function totals() {
  const reports = existsSync(folder) ? readdirSync(folder).map((name) => JSON.parse(readFileSync(join(folder, name), "utf8"))) : [];
  let passed = 0;
  let failed = 0;
  for (const report of reports) {
    passed += report.numPassedTests;
    failed += report.numFailedTests;
    failed += (report.testResults ?? []).filter((file) => file.status === "failed" && file.assertionResults.length === 0).length;
  }
  return { passed, failed };
}
