import { readFile, rm, stat, utimes, writeFile } from "node:fs/promises";
import { describe, expect, it } from "vitest";
import { tapwise } from "../commandLine.js";
import { useTemporaryFolder } from "../temporaryFolder.js";
import { leaf, writeLeaves } from "./leaves.js";

const { at } = useTemporaryFolder();
const names = ["a.png", "b.png", "deep/c.png"];
const record = "soft/.tapwise-batch.json";

/** Filters the folder and tells what became of each image. */
async function filter(kernel: string, ...options: string[]): Promise<{ exitCode: number; became: Record<string, string>; code?: string }> {
  const { exitCode, stdout } = await tapwise("filter", at("sheets"), at("soft"), "--kernel", kernel, "--json", ...options);
  const { images = [], code } = JSON.parse(stdout) as { images?: { name: string; status: string }[]; code?: string };
  return { exitCode, became: Object.fromEntries(images.map(({ name, status }) => [name, status])), ...(code !== undefined && { code }) };
}

/** When each result was written: unchanged where it was left alone. */
async function times(): Promise<number[]> {
  return Promise.all(names.map(async (name) => (await stat(at(`soft/${name}`))).mtimeMs));
}

/** Moves the time of a file by some seconds. */
async function shift(name: string, seconds: number): Promise<void> {
  const { mtimeMs } = await stat(at(name));
  await utimes(at(name), mtimeMs / 1000 + seconds, mtimeMs / 1000 + seconds);
}

describe("a batch goes on where it stopped", () => {
  it("leaves what is done alone and says so", async () => {
    await writeLeaves(at("sheets"), names);
    await filter("gaussian 1");
    const before = await times();
    expect(await filter("gaussian 1")).toEqual({ exitCode: 0, became: { "a.png": "done before", "b.png": "done before", "deep/c.png": "done before" } });
    const people = await tapwise("filter", at("sheets"), at("soft"), "--kernel", "gaussian 1");
    expect(people).toMatchObject({ exitCode: 0, stderr: "", stdout: expect.stringContaining("0 of 3 images filtered, 3 done before; ") });
    expect(await times()).toEqual(before);
  });

  it("does what is missing, new or changed since", async () => {
    await writeLeaves(at("sheets"), names);
    await filter("gaussian 1");
    await rm(at("soft/a.png"));
    await writeFile(at("sheets/new.png"), leaf(9));
    await writeFile(at("sheets/b.png"), leaf(8));
    await shift("sheets/b.png", 5);
    expect(await filter("gaussian 1")).toEqual({
      exitCode: 0,
      became: { "a.png": "filtered", "b.png": "filtered", "deep/c.png": "done before", "new.png": "filtered" },
    });
    expect(await tapwise("filter", at("sheets/b.png"), at("single.png"), "--kernel", "gaussian 1")).toMatchObject({ exitCode: 0 });
    expect(await readFile(at("soft/b.png"))).toEqual(await readFile(at("single.png")));
  });

  it("does all anew with --force", async () => {
    await writeLeaves(at("sheets"), names);
    await filter("gaussian 1");
    expect(await filter("gaussian 1", "--force")).toEqual({ exitCode: 0, became: { "a.png": "filtered", "b.png": "filtered", "deep/c.png": "filtered" } });
  });
});

describe("results of other settings", () => {
  it.each([
    ["another kernel", "gaussian 2", []],
    ["another origin", "gaussian 1", ["--origin", "0,0"]],
    ["another border", "gaussian 1", ["--border", "zero"]],
    ["another gain", "gaussian 1", ["--gain", "1/2"]],
    ["another light", "gaussian 1", ["--light", "linear"]],
  ])("are not mixed: %s", async (_, kernel, options) => {
    await writeLeaves(at("sheets"), names);
    await filter("gaussian 1");
    await rm(at("soft/a.png"));
    const kept = await readFile(at("soft/b.png"));
    expect(await filter(kernel, ...options)).toEqual({ exitCode: 1, became: {}, code: "file-exists" });
    expect(await readFile(at("soft/b.png"))).toEqual(kept);
    expect((await filter(kernel, ...options, "--force")).became).toEqual({ "a.png": "filtered", "b.png": "filtered", "deep/c.png": "filtered" });
    expect(await readFile(at("soft/b.png"))).not.toEqual(kept);
  });

  it.each([
    ["the same kernel in other words", "gaussian sigma=1", []],
    ["another build", "gaussian 1", ["--build", "scalar"]],
    ["more memory", "gaussian 1", ["--memory-limit", "512MiB"]],
  ])("are these where nothing in them differs: %s", async (_, kernel, options) => {
    await writeLeaves(at("sheets"), names);
    await filter("gaussian 1");
    expect((await filter(kernel, ...options)).became["a.png"]).toBe("done before");
  });

  it("stand in nobody's way when they are gone", async () => {
    await writeLeaves(at("sheets"), names);
    await filter("gaussian 1");
    for (const name of names) await rm(at(`soft/${name}`));
    expect((await filter("gaussian 2")).became["a.png"]).toBe("filtered");
    expect(JSON.parse(await readFile(at(record), "utf8"))).toMatchObject({ kernel: "gaussian 2", replaces: false });
  });

  it("are replaced by a later command too, where --force was given and the first one did not come to its end", async () => {
    await writeLeaves(at("sheets"), names);
    await filter("gaussian 1");
    await filter("gaussian 2", "--force");
    await shift("soft/b.png", -60); // as if it were still the one from before
    await shift("sheets/b.png", -120);
    expect((await filter("gaussian 2")).became).toEqual({ "a.png": "done before", "b.png": "filtered", "deep/c.png": "done before" });
  });
});

describe("files of unknown origin in the place of results", () => {
  it("stay, and are told, where they are newer than the image; where they are older they are an error", async () => {
    await writeLeaves(at("sheets"), names);
    await writeLeaves(at("soft"), ["a.png", "b.png"]);
    for (const name of ["a.png", "b.png"]) await shift(`soft/${name}`, -60);
    await shift("sheets/a.png", -120);
    const kept = await Promise.all(["a.png", "b.png"].map((name) => readFile(at(`soft/${name}`))));
    for (let time = 0; time < 2; time++) {
      const { exitCode, stdout, stderr } = await tapwise("filter", at("sheets"), at("soft"), "--kernel", "gaussian 1");
      expect(exitCode).toBe(1);
      expect(stdout).toMatch(
        time === 0 ? /1 of 3 images filtered, 1 there before, 1 failed/ : /0 of 3 images filtered, 1 done before, 1 there before, 1 failed/,
      );
      expect(stderr).toContain("1 image left alone: results were there");
      expect(stderr).toMatch(/b\.png exists and was left as it is.*\[file-exists\]/);
    }
    expect(await Promise.all(["a.png", "b.png"].map((name) => readFile(at(`soft/${name}`))))).toEqual(kept);
  });

  it.each(["", "veins", "[]", '{"digest": 5}'])("a record that cannot be right counts for nothing: %s", async (text) => {
    await writeLeaves(at("sheets"), names);
    await writeLeaves(at("soft"), []);
    await filter("gaussian 1");
    await writeFile(at(record), text);
    const { became, code } = await filter("gaussian 2");
    expect(code ?? became["a.png"]).toMatch(/^(there before|file-exists)$/);
    expect((await filter("gaussian 2", "--force")).became["a.png"]).toBe("filtered");
  });
});
