import { execFileSync } from "node:child_process";
import { mkdir, readFile, symlink, writeFile } from "node:fs/promises";
import { describe, expect, it } from "vitest";
import { tapwise } from "../commandLine.js";
import { useTemporaryFolder } from "../temporaryFolder.js";
import { filesBelow, leaf, writeLeaves } from "./leaves.js";

const { at } = useTemporaryFolder();
const record = ".tapwise-batch.json";
const filter = (...options: string[]) => tapwise("filter", at("sheets"), at("soft"), "--kernel", "gaussian 1", ...options);

describe("a folder of images", () => {
  const names = ["ash.png", "Blätter/Ahorn.PNG", "Blätter/葉/葉脈.png", "лист.png", "ورقة.png", "🍁 two words.png", "e\u0301.png", "\u00e9.png"];

  it("becomes a folder of the same names, each image as filtered by itself", async () => {
    await writeLeaves(at("sheets"), names);
    const outcome = await filter();
    expect(outcome).toMatchObject({ exitCode: 0, stderr: "" });
    expect(outcome.stdout).toMatch(new RegExp(`^${at("soft")}: 8 of 8 images filtered; [\\d.]+ s\\.\\n$`));
    expect(await filesBelow(at("soft"))).toEqual([...names, record].sort());
    for (const name of names) {
      expect(await tapwise("filter", at(`sheets/${name}`), at("single.png"), "--kernel", "gaussian 1", "--force")).toMatchObject({ exitCode: 0 });
      expect(await readFile(at(`soft/${name}`))).toEqual(await readFile(at("single.png")));
    }
  });

  it("is listed whole with --json", async () => {
    await writeLeaves(at("sheets"), ["a.png", "b.png"]);
    await writeFile(at("sheets/torn.png"), leaf(1).subarray(0, 60));
    const { stdout, stderr, exitCode } = await filter("--json");
    expect({ exitCode, stderr }).toEqual({ exitCode: 1, stderr: "" });
    const report = JSON.parse(stdout);
    expect(report).toMatchObject({ input: at("sheets"), output: at("soft"), found: 3, filtered: 2, done: 0, kept: 0, failed: 1, left: 0 });
    expect(report.images).toMatchObject([
      { name: "a.png", status: "filtered", width: 12, height: 10, channels: 1, method: expect.any(String), milliseconds: expect.any(Number) },
      { name: "b.png", status: "filtered" },
      { name: "torn.png", status: "failed", error: { code: "invalid-png", fault: "caller", message: expect.stringContaining("torn.png") } },
    ]);
  });

  it("may hold images of many layouts", async () => {
    await mkdir(at("sheets"));
    const widths = [3, 4, 5, 6, 7, 8, 3, 4, 9, 3];
    for (const [index, width] of widths.entries()) await writeFile(at(`sheets/${index}.png`), leaf(index, width, 5));
    expect(JSON.parse((await filter("--json")).stdout).images.map(({ width }: { width: number }) => width)).toEqual(widths);
  });

  it("without images leads to nothing", async () => {
    await mkdir(at("sheets"));
    await writeFile(at("sheets/notes.txt"), "veins");
    const { exitCode, stdout } = await filter();
    expect({ exitCode, stdout }).toEqual({ exitCode: 0, stdout: `${at("sheets")} holds no PNG files: nothing to do.\n` });
    expect(await filesBelow(at())).toEqual(["sheets/notes.txt"]);
  });

  it("is told once about what many images have in common", async () => {
    await writeLeaves(at("sheets"), ["a.png", "b.png", "c.png"]);
    const { stderr } = await filter("--output-sample", "u16");
    expect(stderr).toBe("3 images: 8-bit values were written to 16 bits as they are, which looks black: --gain 257 maps the whole range.\n");
  });
});

describe("what cannot be filtered", () => {
  it("is told at the end and stops nothing else", async () => {
    await writeLeaves(at("sheets"), ["a.png", "m/b.png", "z.png"]);
    await writeFile(at("sheets/empty.png"), "");
    await writeFile(at("sheets/torn.png"), leaf(1).subarray(0, 60));
    await symlink("nowhere.png", at("sheets/gone.png"));
    await symlink("round.png", at("sheets/round.png"));
    execFileSync("mkfifo", [at("sheets/pipe.png")]);
    const { exitCode, stdout, stderr } = await filter();
    expect(exitCode).toBe(1);
    expect(stdout).toContain("3 of 8 images filtered, 5 failed; ");
    const lines = stderr.trimEnd().split("\n");
    expect(lines).toHaveLength(5);
    for (const [name, reason, code] of [
      ["gone.png", "no such file", "file-unreadable"],
      ["pipe.png", "not a plain file", "file-unreadable"],
      ["round.png", "round in a circle", "file-unreadable"],
      ["empty.png", "", "invalid-png"],
      ["torn.png", "", "invalid-png"],
    ] as const) {
      const line = lines.find((one) => one.includes(name));
      expect(line).toMatch(new RegExp(`^failed: .*${reason}.*\\[${code}\\]$`));
    }
    expect(await filesBelow(at("soft"))).toEqual([record, "a.png", "m/b.png", "z.png"]);
  });

  it("is shown in part where there is much of it, and in whole with --json", async () => {
    await mkdir(at("sheets"));
    for (let index = 0; index < 25; index++) await writeFile(at(`sheets/${index}.png`), "veins");
    expect((await filter()).stderr).toContain("failed: 5 more; --json lists all of them.\n");
    expect(JSON.parse((await filter("--json")).stdout).images).toHaveLength(25);
    expect(await filesBelow(at())).not.toContain(`soft/${record}`);
  });

  it("is hidden: such names are left alone", async () => {
    await writeLeaves(at("sheets"), ["a.png", ".b.png", ".trash/c.png"]);
    expect((await filter()).stdout).toContain("1 of 1 image filtered");
  });

  it("may have a name that is no UTF-8, on systems that allow it", async () => {
    await writeLeaves(at("sheets"), ["a.png"]);
    await writeFile(Buffer.concat([Buffer.from(`${at("sheets")}/bl`), Buffer.of(0xe4), Buffer.from("tter.png")]), leaf(1));
    const { exitCode, stdout, stderr } = await filter();
    expect(exitCode).toBe(1);
    expect(stdout).toContain("1 of 2 images filtered, 1 failed");
    expect(stderr).toMatch(/bl\uFFFDtter\.png cannot be read: .*its name is not in UTF-8.*\[file-unreadable\]\n$/);
  });

  it("cannot steer the terminal by its name", async () => {
    await mkdir(at("sheets"));
    await writeFile(at("sheets/\u001b[31mred\n.png"), "veins");
    const { stderr } = await filter();
    expect(stderr).toContain("\\x1b[31mred\\x0a.png");
    expect(stderr.trimEnd().split("\n")).toHaveLength(1);
  });
});

describe("links", () => {
  it("to folders are not followed, so that a circle ends", async () => {
    await writeLeaves(at("sheets"), ["a.png", "deep/b.png"]);
    await symlink("..", at("sheets/deep/up"));
    await symlink(".", at("sheets/self"));
    const { exitCode, stdout, stderr } = await filter();
    expect({ exitCode, stderr }).toEqual({ exitCode: 0, stderr: "Links to folders are not followed: deep/up, self.\n" });
    expect(stdout).toContain("2 of 2 images filtered");
  });

  it("to images are, and so is the folder itself", async () => {
    await writeLeaves(at("real"), ["a.png"]);
    await writeLeaves(at("elsewhere"), ["b.png"]);
    await symlink("../elsewhere/b.png", at("real/b.png"));
    await symlink("real", at("sheets"));
    expect((await filter()).stdout).toContain("2 of 2 images filtered");
    expect(await filesBelow(at("elsewhere"))).toEqual(["b.png"]);
  });
});

describe("results never become input", () => {
  it.each([
    ["the folder itself", "sheets"],
    ["a folder in it", "sheets/soft"],
    ["a folder around it", "."],
    ["a link to it", "link"],
    ["a folder in it behind a link", "link/deep"],
  ])("%s is refused as output", async (_, output) => {
    await writeLeaves(at("sheets"), ["a.png", "deep/b.png"]);
    await symlink("sheets", at("link"));
    const before = await filesBelow(at());
    for (const force of [[], ["--force"]]) {
      const outcome = await tapwise("filter", at("sheets"), at(output), "--kernel", "delta", ...force);
      expect(outcome).toMatchObject({ exitCode: 2, stdout: "", stderr: expect.stringMatching(/Choose a folder beside it.*\[usage\]/) });
    }
    expect(await filesBelow(at())).toEqual(before);
  });

  it("a name that begins like the folder's is another folder", async () => {
    await writeLeaves(at("sheets"), ["a.png"]);
    expect(await tapwise("filter", at("sheets"), at("sheets-soft"), "--kernel", "delta")).toMatchObject({ exitCode: 0 });
  });

  it("links among the results do not lead back to the images", async () => {
    await writeLeaves(at("sheets"), ["a.png", "deep/b.png", "c.png"]);
    await mkdir(at("soft"));
    await symlink("../sheets/a.png", at("soft/a.png"));
    await symlink("../sheets/deep", at("soft/deep"));
    const images = await Promise.all(["a.png", "deep/b.png"].map((name) => readFile(at(`sheets/${name}`))));
    const { exitCode, stdout, stderr } = await filter("--force");
    expect(exitCode).toBe(1);
    expect(stdout).toContain("1 of 3 images filtered, 2 failed");
    expect(stderr).toMatch(/a\.png cannot be written: it is a link/);
    expect(stderr).toMatch(/deep.* cannot be written: it lies in /);
    expect(await Promise.all(["a.png", "deep/b.png"].map((name) => readFile(at(`sheets/${name}`))))).toEqual(images);
  });
});
