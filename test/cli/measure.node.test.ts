import { mkdir, readFile, readdir, writeFile } from "node:fs/promises";
import { beforeAll, describe, expect, it } from "vitest";
import { type HardwareProfile, createEngine } from "../../src/index.js";
import type { Crossover } from "../../src/measure/index.js";
import { run } from "../../src/cli/run.js";
import { type Outcome, tapwise } from "./commandLine.js";
import { useTemporaryFolder } from "./temporaryFolder.js";

const { at } = useTemporaryFolder();
const small = ["--size", "48x32", "--sizes", "3,7,15", "--seconds", "1"];

interface Measured {
  profile: HardwareProfile;
  crossover: Crossover;
}

describe("measure", () => {
  let outcome: Outcome;
  let report: Measured;
  beforeAll(async () => {
    outcome = await tapwise("measure", ...small, "--build", "simd", "--channels", "3", "--sample", "f32", "--border", "constant 0.5", "--json");
    report = JSON.parse(outcome.stdout) as Measured;
  }, 120_000);

  it("gives a profile and a crossover of what was asked", () => {
    expect(outcome).toMatchObject({ exitCode: 0, stderr: "" });
    expect(Object.keys(report)).toEqual(["profile", "crossover", "written", "failures", "notes"]);
    expect(report.profile).toMatchObject({ version: 2, build: "simd", threads: 1 });
    expect(report.crossover).toMatchObject({ layout: { width: 48, height: 32, channels: 3, sample: "f32" }, border: { constant: 0.5 }, separable: true });
    const sizes = report.crossover.rows.map(({ size }) => size);
    expect(sizes.length).toBeGreaterThan(0);
    expect([3, 7, 15]).toEqual(expect.arrayContaining(sizes));
    for (const { milliseconds } of report.crossover.rows) for (const time of Object.values(milliseconds)) expect(time).toBeGreaterThan(0);
  });

  it("gives a profile that engines take", async () => {
    const engine = await createEngine({ build: "simd", profile: report.profile });
    expect(engine.profile.host).toBe(report.profile.host);
    engine.dispose();
  });

  it("predicts by the profile that it measured", () => {
    expect(report.crossover.profile).toBe(report.profile.host);
  });
});

describe("what people see", () => {
  it("is what was measured, a table, sentences, the profile and the files", async () => {
    const { exitCode, stdout, stderr } = await tapwise(
      "measure",
      ...small,
      "--kernels",
      "unstructured",
      "--profile",
      at("kiosk.json"),
      "--report",
      at("kiosk.html"),
    );
    expect({ exitCode, stderr }).toEqual({ exitCode: 0, stderr: "" });
    expect(stdout).toMatch(/^Measured with images of 48×32, one channel of bytes, and kernels without structure/);
    expect(stdout).toMatch(/^taps +measured +predicted .*fastest +chosen +regret$/m);
    expect(stdout).toMatch(/^\d+×\d+ +[\d.]+/m);
    expect(stdout).toMatch(/^Profile of .+: \d+ of \d+ prices were measured well/m);
    expect(stdout).toContain(`Written: ${at("kiosk.json")} and ${at("kiosk.html")}.\n`);
    expect(stdout.endsWith("\n")).toBe(true);
    const html = await readFile(at("kiosk.html"), "utf8");
    expect(html).toMatch(/^<!doctype html>/);
    expect(html).toContain("<svg");
    const profile = JSON.parse(await readFile(at("kiosk.json"), "utf8"));
    expect(profile.version).toBe(2);
    expect(await tapwise("explain", "--size", "64x64", "--kernel", "box 3", "--profile", at("kiosk.json"))).toMatchObject({ exitCode: 0 });
    expect((await readdir(at())).sort()).toEqual(["kiosk.html", "kiosk.json"]);
  });

  it("is the profile alone where crossings are not wanted", async () => {
    const { exitCode, stdout } = await tapwise("measure", "--no-crossover", "--seconds", "0.3", "--profile", at("kiosk.json"));
    expect(exitCode).toBe(0);
    expect(stdout).toMatch(/^Profile of /);
    expect(stdout).not.toContain("taps  ");
    expect(JSON.parse((await tapwise("measure", "--no-crossover", "--seconds", "0.3", "--json")).stdout)).toMatchObject({ crossover: null, written: [] });
  });

  it("is a bar with the time left where standard error is a terminal", async () => {
    let shown = "";
    const stderr = { write: (text: string) => ((shown += text), true), isTTY: true, columns: 100 };
    expect(await run(["measure", ...small, "--json"], { stdout: { write: () => true }, stderr })).toBe(0);
    expect(shown).toContain("profile [");
    expect(shown).toMatch(/crossings, \d kernel sizes? so far \[=+-*\] \d+ % {2}\d+ s left/);
    expect(shown.endsWith("\u001b[2K")).toBe(true);
  });
});

describe("a question that cannot be measured is refused before time is spent", () => {
  it.each([
    [["--size", "0x9"], "invalid-raster", "0", 2],
    [["--size", "9"], "usage", "--size", 2],
    [["--channels", "5"], "usage", "1, 2, 3, 4", 2],
    [["--sample", "u32"], "usage", "u8, u16, f32", 2],
    [["--border", "constant 300"], "invalid-constant", "300", 2],
    [["--border", "mirror"], "usage", "--border", 2],
    [["--sizes", "3,4"], "usage", "odd whole numbers", 2],
    [["--sizes", ""], "usage", "odd whole numbers", 2],
    [["--sizes", "-3"], "usage", "odd whole numbers", 2],
    [["--sizes", "1025"], "usage", "odd whole numbers", 2],
    [["--kernels", "box"], "usage", "separable, unstructured", 2],
    [["--seconds", "0"], "usage", "seconds", 2],
    [["--seconds", "1e9"], "usage", "seconds", 2],
    [["--seconds", "soon"], "usage", "--seconds", 2],
    [["--threads", "0"], "usage", "--threads", 2],
    [["--memory-limit", "1"], "invalid-number", "65536", 2],
    [["--no-crossover", "--report", "OUT"], "usage", "--report", 2],
    [["--no-crossover", "--sizes", "3"], "usage", "--sizes", 2],
    [["--profile", "OUT", "--report", "OUT"], "usage", "both name", 2],
    [["--profile", "TAKEN"], "file-exists", "--force", 1],
    [["--report", "TAKEN"], "file-exists", "--force", 1],
    [["--report", "FOLDER", "--force"], "file-unwritable", "folder", 1],
    [["--profile", "ABSENT"], "file-unwritable", "no such file", 1],
    [["more"], "usage", "too many arguments", 2],
  ])("%j", async (options, code, words, wanted) => {
    await writeFile(at("taken"), "kept");
    await mkdir(at("folder"));
    const names: Record<string, string> = { OUT: at("out"), TAKEN: at("taken"), FOLDER: at("folder"), ABSENT: at("absent/out") };
    const start = performance.now();
    // With an hour to spend, an answer within a minute is one that did not wait for a measurement.
    const { exitCode, stdout } = await tapwise(
      "measure",
      "--json",
      ...(options.includes("--seconds") ? [] : ["--seconds", "3600"]),
      ...options.map((word) => names[word] ?? word),
    );
    expect(performance.now() - start).toBeLessThan(60_000);
    expect(exitCode).toBe(wanted);
    expect(JSON.parse(stdout)).toMatchObject({ code, message: expect.stringMatching(new RegExp(words, "i")) });
    expect((await readdir(at())).sort()).toEqual(["folder", "taken"]);
    expect(await readFile(at("taken"), "utf8")).toBe("kept");
  });
});

describe("files", () => {
  it("that exist are replaced with --force", async () => {
    await writeFile(at("kiosk.json"), "old");
    expect(await tapwise("measure", "--no-crossover", "--seconds", "0.2", "--profile", at("kiosk.json"), "--force")).toMatchObject({ exitCode: 0 });
    expect(JSON.parse(await readFile(at("kiosk.json"), "utf8"))).toMatchObject({ version: 2 });
  });

  it("that cannot be written in the end do not keep the rest from being told", async () => {
    const measured = tapwise("measure", ...small, "--profile", at("kiosk.json"), "--report", at("kiosk.html"));
    await new Promise((resolve) => setTimeout(resolve, 300));
    await writeFile(at("kiosk.json"), "somebody else's");
    const { exitCode, stdout, stderr } = await measured;
    expect(exitCode).toBe(1);
    expect(stdout).toContain(`Written: ${at("kiosk.html")}.`);
    expect(stdout).toMatch(/^Profile of /m);
    expect(stderr).toMatch(/^failed: .*kiosk\.json exists.*\[file-exists\]\n$/);
    expect(await readFile(at("kiosk.json"), "utf8")).toBe("somebody else's");
  });
});

describe.each([
  ["SIGINT", 130],
  ["SIGTERM", 143],
  ["SIGHUP", 129],
] as const)("%s while it measures", (signal, wanted) => {
  it.each([["profile ["], ["crossings, "]])("ends it soon, with a sentence and no file: at %s", async (moment) => {
    const written = { stdout: "", stderr: "" };
    let isSent = false;
    const stderr = {
      isTTY: true,
      columns: 100,
      write(text: string) {
        written.stderr += text;
        if (!isSent && written.stderr.includes(moment)) {
          isSent = true;
          setImmediate(() => process.emit(signal, signal));
        }
        return true;
      },
    };
    const seconds = moment === "profile [" ? "600" : "2";
    const options = ["--size", "48x32", "--sizes", "3,7", "--seconds", seconds, "--profile", at("kiosk.json"), "--report", at("kiosk.html")];
    const exitCode = await run(["measure", ...options], { stdout: { write: (text) => (written.stdout += text) }, stderr });
    expect({ exitCode, stdout: written.stdout }).toEqual({ exitCode: wanted, stdout: "" });
    // The bar is gone before the sentence stands there.
    expect(written.stderr).toMatch(new RegExp(`\\[2Ktapwise: Interrupted by ${signal}: .*\\[interrupted\\]\\n$`));
    expect(await readdir(at())).toEqual([]);
    expect(process.listenerCount(signal)).toBe(0);
  });
});
