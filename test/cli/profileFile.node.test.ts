import { mkdir, readFile, symlink, truncate, writeFile } from "node:fs/promises";
import { beforeEach, describe, expect, it } from "vitest";
import { type HardwareProfile, createEngine } from "../../src/index.js";
import { tapwise } from "./commandLine.js";
import { patternedSamples, readPng, writePng } from "./pngFiles.js";
import { useTemporaryFolder } from "./temporaryFolder.js";

const { at } = useTemporaryFolder();
const engine = await createEngine({ build: "simd" });
const shipped = engine.profile;
engine.dispose();

/** Names of the prices of taps, of loops over them and of running sums. */
const methodsOwn = /Tap$|Loop$|Pair$|Sum$|^pairSample$|^wordSample$|^byteResult$/;

/** Made up, and no machine's: the shipped prices, with everything but the FFT's own work and what all methods share a thousand times as dear. */
const madeUp: HardwareProfile = {
  ...shipped,
  host: "made-up kiosk",
  nanoseconds: Object.fromEntries(Object.entries(shipped.nanoseconds).map(([name, price]) => [name, methodsOwn.test(name) ? price * 1000 : price])),
};

const question = ["--size", "640x480", "--build", "simd", "--kernel", "1 2; 3 5"];

beforeEach(() => writeFile(at("kiosk.json"), JSON.stringify(madeUp)));

describe("a measured profile", () => {
  it("decides what explain chooses", async () => {
    const without = JSON.parse((await tapwise("explain", ...question, "--json")).stdout);
    const { stdout, stderr, exitCode } = await tapwise("explain", ...question, "--json", "--profile", at("kiosk.json"));
    expect({ exitCode, stderr }).toEqual({ exitCode: 0, stderr: "" });
    const withIt = JSON.parse(stdout);
    expect([without.method, withIt.method]).toEqual(["direct", "fft"]);
    expect(withIt).toMatchObject({ profile: "made-up kiosk", notes: [] });
  });

  it("decides how filter computes, and changes no sample beyond rounding", async () => {
    const samples = patternedSamples(40 * 30, 8);
    await writeFile(at("leaf.png"), writePng({ width: 40, height: 30, bitDepth: 8, colorType: 0, samples }));
    const results: number[][] = [];
    for (const options of [[], ["--profile", at("kiosk.json")]]) {
      const { stdout } = await tapwise("filter", at("leaf.png"), at("out.png"), "--build", "simd", "--kernel", "gaussian 2", "--force", "--json", ...options);
      results.push(readPng(await readFile(at("out.png"))).samples);
      expect(JSON.parse(stdout).method === "fft").toBe(options.length > 0);
    }
    expect(Math.max(...results[0]!.map((sample, index) => Math.abs(sample - results[1]![index]!)))).toBeLessThanOrEqual(1);
  });

  it("decides for a folder too", async () => {
    await mkdir(at("sheets"));
    await writeFile(at("sheets/leaf.png"), writePng({ width: 40, height: 30, bitDepth: 8, colorType: 0, samples: patternedSamples(1200, 8) }));
    const options = ["--build", "simd", "--kernel", "gaussian 2", "--json", "--profile", at("kiosk.json")];
    expect(JSON.parse((await tapwise("filter", at("sheets"), at("soft"), ...options)).stdout).images).toMatchObject([{ method: "fft" }]);
  });

  it("of another number of threads is used with a note", async () => {
    await writeFile(at("kiosk.json"), JSON.stringify({ ...madeUp, threads: 3 }));
    const { stdout, stderr, exitCode } = await tapwise("explain", ...question, "--profile", at("kiosk.json"));
    expect(exitCode).toBe(0);
    expect(stdout).toContain("made-up kiosk");
    expect(stderr).toBe(`${at("kiosk.json")}: Measured with 3 threads, used with 1 thread: what threads cost each other is an estimate.\n`);
  });

  it("may begin with a byte order mark", async () => {
    await writeFile(at("kiosk.json"), `\uFEFF${JSON.stringify(madeUp)}`);
    expect(await tapwise("explain", ...question, "--profile", at("kiosk.json"))).toMatchObject({ exitCode: 0 });
  });
});

describe("a profile that cannot be used is refused, and nothing is filtered", () => {
  const malformed: [string, string, string][] = [
    ["no JSON", "veins", "is not valid JSON"],
    ["nothing", "", "JSON"],
    ["a list", "[]", "no JSON object"],
    ["null", "null", "no JSON object"],
    ["an empty object", "{}", "version"],
    ["an older version", JSON.stringify({ ...madeUp, version: 1 }), "version is 1"],
    ["another build", JSON.stringify({ ...madeUp, build: "scalar" }), "scalar"],
    ["a price that is missing", JSON.stringify({ ...madeUp, nanoseconds: {} }), "nanoseconds."],
    ["a negative price", JSON.stringify({ ...madeUp, nanoseconds: { ...madeUp.nanoseconds, run: -1 } }), "nanoseconds.run"],
    ["a price in words", JSON.stringify({ ...madeUp, nanoseconds: { ...madeUp.nanoseconds, run: "5" } }), "nanoseconds.run"],
    ["a prototype in place of prices", '{ "__proto__": { "version": 2 }, "constructor": 5 }', "version"],
    ["brackets without end", "[".repeat(500_000), "JSON"],
    ["more than a megabyte", JSON.stringify({ ...madeUp, more: "x".repeat(1_000_000) }), "larger than 1000000 bytes"],
  ];

  it.each(malformed)("%s", async (_, text, words) => {
    await writeFile(at("kiosk.json"), text);
    await writeFile(at("leaf.png"), writePng({ width: 2, height: 1, bitDepth: 8, colorType: 0, samples: [1, 2] }));
    for (const command of [
      ["explain", ...question],
      ["filter", at("leaf.png"), at("out.png"), "--build", "simd", "--kernel", "delta"],
    ]) {
      const { exitCode, stdout } = await tapwise(...command, "--json", "--profile", at("kiosk.json"));
      expect(exitCode).toBe(1);
      const error = JSON.parse(stdout);
      expect(error).toMatchObject({ code: "invalid-profile", fault: "caller" });
      expect(error.message.startsWith(at("kiosk.json"))).toBe(true);
      expect(error.message).toContain(words);
      expect(error.message.length).toBeLessThan(500);
    }
    await expect(readFile(at("out.png"))).rejects.toMatchObject({ code: "ENOENT" });
  });

  it("ten gigabytes are not read", async () => {
    await truncate(at("kiosk.json"), 10e9);
    const { stdout } = await tapwise("explain", ...question, "--json", "--profile", at("kiosk.json"));
    expect(JSON.parse(stdout)).toMatchObject({ code: "invalid-profile", message: expect.stringContaining("larger than") });
  });

  it("a device without end is not read to its end", async () => {
    const { stdout } = await tapwise("explain", ...question, "--json", "--profile", "/dev/zero");
    expect(JSON.parse(stdout)).toMatchObject({ code: "invalid-profile", message: expect.stringContaining("larger than") });
  });

  it.each([
    ["a missing file", "absent.json", "no such file"],
    ["a folder", "", "it is a folder"],
    ["a link in a circle", "round.json", "round in a circle"],
  ])("%s is a file that cannot be read", async (_, name, words) => {
    await symlink("round.json", at("round.json"));
    const { exitCode, stderr } = await tapwise("explain", ...question, "--profile", at(name));
    expect(exitCode).toBe(1);
    expect(stderr).toMatch(new RegExp(`${words}.*\\[file-unreadable\\]`));
  });
});

describe("--threads", () => {
  it.each(["0", "-1", "1.5", "many", "65"])("%s is refused", async (threads) => {
    expect(await tapwise("explain", ...question, "--threads", threads)).toMatchObject({ exitCode: 2, stderr: expect.stringMatching(/threads/) });
  });

  it("1 is what an engine has", async () => {
    expect(JSON.parse((await tapwise("explain", ...question, "--threads", "1", "--json")).stdout)).toMatchObject({ threads: 1, notes: [] });
  });
});
