import { mkdir, readFile, readdir, writeFile } from "node:fs/promises";
import { describe, expect, it } from "vitest";
import { tapwise } from "../commandLine.js";
import { readPng } from "../pngFiles.js";
import { startTapwise } from "../startedCommand.js";
import { useTemporaryFolder } from "../temporaryFolder.js";
import { filesBelow, leaf } from "./leaves.js";

const { at } = useTemporaryFolder();
const imageCount = 300;

async function untilThereAreResults(): Promise<void> {
  for (;;) {
    const names = await readdir(at("soft")).catch((): string[] => []);
    if (names.filter((name) => name.endsWith(".png")).length > 2) return;
    await new Promise((resolve) => setTimeout(resolve, 2));
  }
}

describe.each([
  ["SIGINT", 130],
  ["SIGTERM", 143],
] as const)("%s during a batch", (signal, wanted) => {
  it.each([[[]], [["--json"]]])("ends it between two images: whole files, a summary, and the next command goes on %s", async (json) => {
    await mkdir(at("sheets"));
    for (let index = 0; index < imageCount; index++) await writeFile(at(`sheets/${1000 + index}.png`), leaf(index, 60, 50));
    const { child, ended } = startTapwise("filter", at("sheets"), at("soft"), "--kernel", "gaussian 1", ...json);
    await untilThereAreResults();
    child.kill(signal);
    const { exitCode, stdout, stderr } = await ended;
    expect({ exitCode, stderr }).toEqual({ exitCode: wanted, stderr: "" });
    const names = (await filesBelow(at("soft"))).filter((name) => name !== ".tapwise-batch.json");
    expect(names.length).toBeLessThan(imageCount);
    for (const name of names) expect(readPng(await readFile(at(`soft/${name}`)))).toMatchObject({ width: 60, height: 50 });
    const left = imageCount - names.length;
    if (json.length === 0)
      expect(stdout).toMatch(new RegExp(`: ${names.length} of ${imageCount} images filtered, ${left} left; .* Interrupted\\. The same command goes on`));
    else expect(JSON.parse(stdout)).toMatchObject({ found: imageCount, filtered: names.length, left, interrupted: signal });
    const next = await tapwise("filter", at("sheets"), at("soft"), "--kernel", "gaussian 1", "--json");
    expect(JSON.parse(next.stdout)).toMatchObject({ filtered: left, done: names.length, left: 0 });
  });
});

describe("an interruption in this process", () => {
  it("leaves no listener behind", async () => {
    const before = process.listenerCount("SIGINT");
    await mkdir(at("sheets"));
    await writeFile(at("sheets/a.png"), leaf(0));
    await tapwise("filter", at("sheets"), at("soft"), "--kernel", "gaussian 1");
    expect(process.listenerCount("SIGINT")).toBe(before);
  });
});
