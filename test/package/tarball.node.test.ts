import { spawnSync } from "node:child_process";
import { readFileSync, readdirSync } from "node:fs";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { installTarball, root, type Installation } from "./installed.js";

let installation: Installation;
beforeAll(() => {
  installation = installTarball();
});
afterAll(() => installation.remove());

const manifest = JSON.parse(readFileSync(join(root, "package.json"), "utf8"));

/** A user's first script: one convolution, small enough to do by hand. */
const script = `
import { createEngine, kernel } from "tapwise";
const engine = await createEngine();
const taps = kernel([[0, 1, 0], [2, 3, 4], [0, 5, 0]]);
const image = { data: Uint8Array.of(1, 2, 3, 4), width: 2, height: 2 };
console.log(JSON.stringify([...engine.convolve(image, taps, { border: "zero" }).data]));
engine.dispose();
`;

describe("the tarball", () => {
  test("holds the library, the command, the licences and the documents, and no source, test or debug build", () => {
    const { files } = installation;
    expect(files).toEqual(
      expect.arrayContaining([
        "package.json",
        "README.md",
        "LICENSE",
        "CHANGELOG.md",
        "dist/index.js",
        "dist/index.d.ts",
        "dist/cli/tapwise.js",
        "dist/cli/LICENCES.txt",
      ]),
    );
    const unexpected = files.filter((path) => !/^(package\.json|README\.md|LICENSE|CHANGELOG\.md|dist\/.+\.(js|d\.ts)|dist\/cli\/LICENCES\.txt)$/.test(path));
    expect(unexpected).toEqual([]);
    expect(files.filter((path) => /(^|\/)(debug|test|bench)/.test(path))).toEqual([]);
  });

  test("every export leads to files that are there and can be imported", () => {
    const targets = Object.values(manifest.exports as Record<string, string | Record<string, string>>).flatMap((entry) =>
      typeof entry === "string" ? [entry] : Object.values(entry),
    );
    expect(targets.map((target) => target.replace("./", "")).filter((target) => !installation.files.includes(target))).toEqual([]);
    const names = Object.keys(manifest.exports).filter((name) => !name.endsWith(".json") && name !== "./worker");
    const imports = names.map((name) => `import(${JSON.stringify(name.replace(".", "tapwise"))})`);
    const { status, stderr } = installation.run(`await Promise.all([${imports.join(", ")}]);`);
    expect({ status, stderr }).toEqual({ status: 0, stderr: "" });
  });

  test("the worker's script starts in a worker and waits there", () => {
    const { status, stdout, stderr } = installation.run(`
import { Worker } from "node:worker_threads";
const worker = new Worker(new URL(import.meta.resolve("tapwise/worker")));
worker.on("error", (error) => { throw error; });
setTimeout(() => { console.log("waiting"); void worker.terminate(); }, 500);
worker.on("exit", (code) => console.log("ended", code));`);
    expect({ status, stdout, stderr }).toEqual({ status: 0, stdout: "waiting\nended 1\n", stderr: "" });
  });

  test("installs without fetching anything", () => {
    expect(readdirSync(join(installation.folder, "node_modules")).filter((name) => !name.startsWith("."))).toEqual(["tapwise"]);
  });

  test("convolves rightly from a script", () => {
    // y[r, c] = Σ h[j, i] · x[r − j + 1, c − i + 1], worked by hand: y[0, 0] = 3·1 + 2·2 + 1·3 and so on.
    const { status, stdout, stderr } = installation.run(script);
    expect({ status, stderr, result: status === 0 ? JSON.parse(stdout) : stdout }).toEqual({ status: 0, stderr: "", result: [10, 14, 22, 34] });
  });

  test("the command tells how to use it", () => {
    const command = join(installation.folder, "node_modules", ".bin", "tapwise");
    const { status, stdout } = spawnSync(command, ["--help"], { encoding: "utf8" });
    expect(status).toBe(0);
    expect(stdout).toMatch(/filter/);
    expect(stdout).toMatch(/explain/);
  });

  test("the command measures, and writes a profile and a report that need nothing else", () => {
    const command = join(installation.folder, "node_modules", ".bin", "tapwise");
    const options = ["--size", "64x48", "--sizes", "3,9,31", "--seconds", "1", "--threads", "2", "--profile", "kiosk.json", "--report", "kiosk.html", "--json"];
    const { status, stdout, stderr } = spawnSync(command, ["measure", ...options], { cwd: installation.folder, encoding: "utf8" });
    expect({ status, stderr }).toEqual({ status: 0, stderr: "" });
    expect(JSON.parse(stdout)).toMatchObject({ profile: { version: 2, threads: 2 }, written: ["kiosk.json", "kiosk.html"] });
    const report = readFileSync(join(installation.folder, "kiosk.html"), "utf8");
    expect(report).toContain("<svg");
    expect(report).not.toMatch(/<script|<link|src=|https?:\/\/(?!www\.w3\.org)/);
    const explained = spawnSync(command, ["explain", "--size", "64x48", "--kernel", "disk 3", "--threads", "2", "--profile", "kiosk.json", "--json"], {
      cwd: installation.folder,
      encoding: "utf8",
    });
    const found = JSON.parse(explained.stdout) as { profile: string; notes: string[] };
    expect(found.profile.startsWith(JSON.parse(stdout).profile.host)).toBe(true);
    expect(found.notes).toEqual([]);
  });

  test("the command's licence texts are those of what is bundled", () => {
    const text = readFileSync(join(installation.folder, "node_modules", "tapwise", "dist", "cli", "LICENCES.txt"), "utf8");
    for (const name of ["commander", "pngjs", "cli-progress"]) expect(text).toMatch(new RegExp(`^${name} ${manifest.devDependencies[name]} \\(MIT\\)$`, "m"));
  });
});
