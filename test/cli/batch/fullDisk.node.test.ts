import type * as FileSystem from "node:fs/promises";
import { beforeEach, describe, expect, it, vi } from "vitest";
import { tapwise } from "../commandLine.js";
import { useTemporaryFolder } from "../temporaryFolder.js";
import { filesBelow, writeLeaves } from "./leaves.js";

/** A disk on which only so many files can be written: every further one meets the error. */
const disk = vi.hoisted(() => ({ filesLeft: Infinity, code: "ENOSPC" }));

vi.mock("node:fs/promises", async (original) => {
  const real = await original<typeof FileSystem>();
  const open: typeof real.open = async (path, flags, mode) => {
    const handle = await real.open(path, flags, mode);
    if (flags !== "wx" || disk.filesLeft-- > 0) return handle;
    handle.writeFile = async (content) => {
      await handle.write(content as Uint8Array, 0, 20); // a disk fills up in the midst of a file
      throw Object.assign(new Error("injected"), { code: disk.code });
    };
    return handle;
  };
  return { ...real, open };
});

const { at } = useTemporaryFolder();
const filter = (...options: string[]) => tapwise("filter", at("sheets"), at("soft"), "--kernel", "gaussian 1", ...options);

beforeEach(async () => {
  disk.filesLeft = Infinity;
  await writeLeaves(at("sheets"), ["a.png", "b.png", "c.png", "d.png"]);
});

describe.each(["ENOSPC", "EDQUOT", "EROFS"])("a disk that takes no more (%s)", (code) => {
  it("ends a batch with a clear error and no half file; the same command goes on later", async () => {
    Object.assign(disk, { filesLeft: 3, code }); // the record and two images
    const { exitCode, stdout, stderr } = await filter();
    expect(exitCode).toBe(1);
    expect(stdout).toContain("2 of 4 images filtered, 1 failed, 1 left; ");
    expect(stdout).toContain("Stopped, as nothing can be written there any more. The same command goes on where it stopped.");
    expect(stderr).toMatch(
      /^failed: .*c\.png cannot be written: (no space left|the disk quota is used up|the file system is read-only).*\[file-unwritable\]\n$/,
    );
    expect(await filesBelow(at("soft"))).toEqual([".tapwise-batch.json", "a.png", "b.png"]);
    disk.filesLeft = Infinity;
    expect((await filter()).stdout).toContain("2 of 4 images filtered, 2 done before; ");
  });

  it("is told at once where not even the first file fits", async () => {
    Object.assign(disk, { filesLeft: 0, code });
    const { exitCode, stdout } = await filter("--json");
    expect(exitCode).toBe(1);
    expect(JSON.parse(stdout)).toMatchObject({ filtered: 0, failed: 1, left: 3 });
    expect(await filesBelow(at("soft"))).toEqual([]);
  });
});

it("another error of one file stops no other", async () => {
  Object.assign(disk, { filesLeft: 1, code: "EIO" }); // the record
  expect(JSON.parse((await filter("--json")).stdout)).toMatchObject({ filtered: 0, failed: 4, left: 0 });
});

it("a folder that may not be written to is told once: without its record no result can be written either", async () => {
  Object.assign(disk, { filesLeft: 0, code: "EACCES" });
  const { exitCode, stdout, stderr } = await filter();
  expect(exitCode).toBe(1);
  expect(stdout).toContain("0 of 4 images filtered, 1 failed, 3 left; ");
  expect(stderr).toMatch(/^failed: .*soft\/\.tapwise-batch\.json cannot be written: permission denied.*\[file-unwritable\]\n$/);
});
