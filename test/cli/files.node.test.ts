import { spawn } from "node:child_process";
import { chmod, mkdir, readFile, readdir, stat, symlink, writeFile } from "node:fs/promises";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";
import { checkOutput, readInput, writeOutput } from "../../src/cli/files.js";
import { useTemporaryFolder } from "./temporaryFolder.js";

const { at } = useTemporaryFolder();
const content = Buffer.from("leaf");

describe("writing a file", () => {
  it("leaves the file and nothing else", async () => {
    await writeOutput(at("out.png"), content, false);
    expect(await readFile(at("out.png"))).toEqual(content);
    expect(await readdir(at())).toEqual(["out.png"]);
  });

  it("does not touch an existing one without force", async () => {
    await writeFile(at("out.png"), "old");
    await expect(writeOutput(at("out.png"), content, false)).rejects.toMatchObject({ code: "file-exists", fault: "caller", received: at("out.png") });
    expect(await readFile(at("out.png"), "utf8")).toBe("old");
    expect(await readdir(at())).toEqual(["out.png"]);
  });

  it("replaces one with force in a single step and keeps its permissions", async () => {
    await writeFile(at("out.png"), "old");
    await chmod(at("out.png"), 0o640);
    const { ino } = await stat(at("out.png"));
    await writeOutput(at("out.png"), content, true);
    expect(await readFile(at("out.png"))).toEqual(content);
    const replaced = await stat(at("out.png"));
    expect(replaced.mode & 0o777).toBe(0o640);
    expect(replaced.ino).not.toBe(ino);
    expect(await readdir(at())).toEqual(["out.png"]);
  });

  it("takes names as long as the file system does", async () => {
    const name = `${"x".repeat(251)}.png`;
    await writeOutput(at(name), content, false);
    expect(await readdir(at())).toEqual([name]);
  });

  it("follows a link to the file that is meant", async () => {
    await mkdir(at("sheets"));
    await writeFile(at("sheets/real.png"), "old");
    await symlink("sheets/real.png", at("out.png"));
    await writeOutput(at("out.png"), content, true);
    expect(await readFile(at("sheets/real.png"))).toEqual(content);
    expect((await readdir(at())).sort()).toEqual(["out.png", "sheets"]);
  });

  it.each([
    ["a missing folder", "missing/out.png", "no such file or folder"],
    ["a folder that is a file", "plain/out.png", "not a folder"],
    ["a folder in its place", "sheets", "it is a folder"],
    ["a name too long", `${"x".repeat(300)}.png`, "name is too long"],
  ])("says why it cannot: %s", async (_, name, words) => {
    await mkdir(at("sheets"));
    await writeFile(at("plain"), "");
    for (const attempt of [checkOutput(at(name), true), writeOutput(at(name), content, true)])
      await expect(attempt).rejects.toMatchObject({ code: "file-unwritable", fault: "host", message: expect.stringContaining(words) });
    expect((await readdir(at())).sort()).toEqual(["plain", "sheets"]);
  });

  it("does not replace a device", async () => {
    await expect(writeOutput("/dev/null", content, true)).rejects.toMatchObject({
      code: "file-unwritable",
      message: expect.stringContaining("not a plain file"),
    });
    expect((await stat("/dev/null")).isCharacterDevice()).toBe(true);
  });

  it("leaves no partial file when the content cannot be written", async () => {
    await expect(writeOutput(at("out.png"), Object(1) as Uint8Array, false)).rejects.toMatchObject({ code: "file-unwritable" });
    expect(await readdir(at())).toEqual([]);
  });
});

describe.each(["SIGINT", "SIGTERM"] as const)("%s while a file is written", (signal) => {
  it("removes what was begun and leaves the old file whole", async () => {
    await writeFile(at("out.png"), "old");
    const files = fileURLToPath(new URL("../../src/cli/files.ts", import.meta.url));
    const script = `import { writeOutput } from ${JSON.stringify(files)};
      process.stdout.write("ready");
      for (;;) await writeOutput(${JSON.stringify(at("out.png"))}, Buffer.alloc(2 ** 27), true);`;
    const child = spawn(process.execPath, ["--import", "tsx", "--input-type=module", "--eval", script], { stdio: ["ignore", "pipe", "inherit"] });
    const ended = new Promise<number | null>((resolve) => child.once("exit", (code) => resolve(code)));
    await new Promise((resolve) => child.stdout.once("data", resolve));
    while (!(await readdir(at())).some((name) => name.endsWith(".part"))) await new Promise((resolve) => setTimeout(resolve, 1));
    child.kill(signal);
    expect(await ended).toBe(signal === "SIGINT" ? 130 : 143);
    expect(await readdir(at())).toEqual(["out.png"]);
    expect([3, 2 ** 27]).toContain((await stat(at("out.png"))).size);
  });
});

describe("reading a file", () => {
  it.each([
    ["a missing one", "missing.png", "no such file or folder"],
    ["a folder", "", "it is a folder"],
  ])("says why it cannot: %s", async (_, name, words) => {
    await expect(readInput(at(name))).rejects.toMatchObject({ code: "file-unreadable", fault: "caller", message: expect.stringContaining(words) });
  });
});
