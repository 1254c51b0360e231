/** `npm run check`: everything that can be said about the sources and the package without running the engine's tests. */
import { spawnSync } from "node:child_process";
import { mkdirSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { buildPackage } from "./build.mjs";
import { buildCore } from "./core.mjs";
import { reportFile } from "./reports.mjs";
import { checkPageSize, mostGzipBytes, sizeTable } from "./sizes.mjs";

const root = join(dirname(fileURLToPath(import.meta.url)), "..");
const packed = join(root, "node_modules", ".cache", "tapwise", "packed");

/** Runs a command; its output is shown where it fails. */
function run(command, ...parameters) {
  const path = join(root, "node_modules", ".bin");
  const { status, stdout, stderr } = spawnSync(command, parameters, {
    cwd: root,
    encoding: "utf8",
    env: { ...process.env, PATH: `${path}:${process.env.PATH}` },
  });
  if (status !== 0) throw new Error(`${stdout}${stderr}`.trim() || `${command} ended with ${status}`);
  return stdout;
}

function pack() {
  rmSync(packed, { recursive: true, force: true });
  mkdirSync(packed, { recursive: true });
  run("npm", "pack", "--ignore-scripts", "--pack-destination", packed);
  return join(packed, readdirSync(packed)[0]);
}

const steps = [
  ["core", () => buildCore(), "the AssemblyScript sources compile without a message and import nothing but the memory"],
  ["types", () => run("tsc", "-p", "tsconfig.json"), "src, test and bench under strict TypeScript"],
  ["lint", () => run("oxlint", "--deny-warnings"), "oxlint"],
  ["format", () => run("oxfmt", "--check"), "oxfmt"],
  ["layers", () => run("vitest", "run", "--project", "node", "test/layers"), "imports, arithmetic, the owner of the memory"],
  ["documents", () => run("vitest", "run", "--project", "node", "test/documents"), "links, anchors and error codes in the documents"],
  ["build", () => buildPackage(), "dist/"],
  ["size", () => checkPageSize(), `what a default page loads: at most ${mostGzipBytes / 1000} kB with gzip`],
  ["publint", () => run("publint", pack(), "--strict"), "the tarball as bundlers and Node read it"],
  ["declarations", () => run("attw", pack(), "--profile", "esm-only", "--no-color"), "the tarball's types as TypeScript resolves them"],
  ["package", () => run("vitest", "run", "--project", "package"), "the tarball installed in an empty folder and used"],
];

/** A step as a row of the report that vitest would write for a test. */
async function attempt([name, action, meaning]) {
  const start = performance.now();
  try {
    await action();
    console.log(`ok      ${name}: ${meaning} (${((performance.now() - start) / 1000).toFixed(1)} s)`);
    return true;
  } catch (error) {
    console.log(`FAILED  ${name}: ${meaning}\n${error instanceof Error ? error.message : error}`);
    return false;
  }
}

const outcomes = [];
for (const step of steps) outcomes.push(await attempt(step));
const numPassedTests = outcomes.filter(Boolean).length;
const numFailedTests = outcomes.length - numPassedTests;
writeFileSync(reportFile("check"), JSON.stringify({ numPassedTests, numFailedTests }));
if (numFailedTests === 0) console.log(`\n${sizeTable(pack())}\n`);
console.log(`${numPassedTests} checks passed, ${numFailedTests} failed`);
process.exitCode = numFailedTests === 0 ? 0 : 1;
