/** `npm test`: builds, runs the tests in Node, then those that need a Chromium, or says that they were left out. */
import { spawnSync } from "node:child_process";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { buildPackage } from "./build.mjs";
import { findChromium } from "./chromium.mjs";
import { reportFile } from "./reports.mjs";

const root = join(dirname(fileURLToPath(import.meta.url)), "..");

/** Runs vitest projects; the report of each run is kept for those who count. */
export function runVitest(name, parameters) {
  const { status } = spawnSync(
    process.execPath,
    [join(root, "node_modules/vitest/vitest.mjs"), "run", "--reporter=default", "--reporter=json", `--outputFile.json=${reportFile(name)}`, ...parameters],
    { cwd: root, stdio: "inherit" },
  );
  return status === 0;
}

async function testAll() {
  await buildPackage({ onlyIfStale: true });
  const nodePassed = runVitest("node", ["--project", "node"]);
  if (findChromium() !== undefined) return runVitest("browser", ["--project", "browser", "--project", "pages"]) && nodePassed;
  const required = process.env.TAPWISE_REQUIRE_BROWSER === "1";
  console.log(
    `Browser tests ${required ? "are required but cannot run" : "were skipped"}: no Chromium found. Get one with "apt-get install chromium" or set TAPWISE_CHROMIUM to its path.`,
  );
  return nodePassed && !required;
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const passed = await testAll().catch((error) => {
    console.error(error instanceof Error ? error.message : error);
    return false;
  });
  process.exitCode = passed ? 0 : 1;
}
