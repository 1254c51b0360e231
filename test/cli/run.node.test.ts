import { spawnSync } from "node:child_process";
import { mkdir, readFile, readdir, writeFile } from "node:fs/promises";
import { fileURLToPath } from "node:url";
import { beforeEach, describe, expect, it } from "vitest";
import { createEngine } from "../../src/index.js";
import { builders } from "../../src/cli/builders.js";
import { tapwise } from "./commandLine.js";
import { headerChunk, patternedSamples, signature, writePng } from "./pngFiles.js";
import { useTemporaryFolder } from "./temporaryFolder.js";

const { at } = useTemporaryFolder();
const packageFile = new URL("../../package.json", import.meta.url);

beforeEach(async () => {
  await writeFile(at("leaf.png"), writePng({ width: 8, height: 6, bitDepth: 8, colorType: 6, samples: patternedSamples(8 * 6 * 4, 8) }));
  await writeFile(at("notes.png"), "Sheet 12: veins");
  await writeFile(at("vast.png"), Buffer.concat([signature, headerChunk(1e6, 1e6, 8, 2)]));
  await mkdir(at("folder"));
});

/** In the arguments, IN and OUT stand for a good image and a place to write to, and @name for a file of the folder. */
function spelled(line: string): string[] {
  const names: Record<string, string> = { IN: at("leaf.png"), OUT: at("out.png") };
  return line.split(" | ").map((word) => names[word] ?? (word.startsWith("@") ? at(word.slice(1)) : word));
}

describe("a wrong command exits with 2 and writes nothing", () => {
  it.each([
    ["filtr | IN | OUT", "usage", "Did you mean filter?"],
    ["filter | IN | OUT", "usage", "--kernel"],
    ["filter | IN | --kernel | delta", "usage", "output"],
    ["filter | IN | OUT | more | --kernel | delta", "usage", "Expected 2"],
    ["filter | IN | OUT | --kernel | delta | --forse", "usage", "Did you mean --force?"],
    ["filter | IN | OUT | --kernel | delta | --extent | smae", "usage", "same, full, valid"],
    ["filter | IN | OUT | --kernel | delta | --method | quick", "usage", "auto, direct"],
    ["filter | IN | OUT | --kernel | delta | --border | mirror", "usage", "half-sample-symmetric"],
    ["filter | IN | OUT | --kernel | delta | --border | constant", "usage", "constant v"],
    ["filter | IN | OUT | --kernel | delta | --border | constant 300", "invalid-constant", "300"],
    ["filter | IN | OUT | --kernel | delta | --border | constant 1,2", "invalid-constant", "2"],
    ["filter | IN | OUT | --kernel | delta | --region | 0,0,8", "usage", "--region"],
    ["filter | IN | OUT | --kernel | delta | --region | 4,4,8,8", "invalid-region", "8"],
    ["filter | IN | OUT | --kernel | delta | --gain | much", "usage", "--gain"],
    ["filter | IN | OUT | --kernel | delta | --tolerance | -1", "invalid-number", "-1"],
    ["filter | IN | OUT | --kernel | delta | --memory-limit | 1 mile", "usage", "--memory-limit"],
    ["filter | IN | OUT | --kernel | delta | --memory-limit | 1", "invalid-number", "65536"],
    ["filter | IN | OUT | --kernel | delta | --output-sample | f32", "usage", "u8, u16"],
    ["filter | IN | OUT | --kernel | box 9 | --extent | valid", "empty-result", "9"],
    ["filter | IN | OUT | --kernel | box 3 | --extent | valid | --border | zero", "border-without-use", "valid"],
    ["filter | IN | OUT | --kernel | sobel x | --border | renormalised", "border-not-applicable", "renormalised"],
    ["filter | IN | OUT | --kernel | sobel x | --alpha | straight", "alpha-not-applicable", "straight"],
    ["filter | IN | OUT | --kernel | 1 2; 3 5 | --method | running-sum", "method-not-applicable", "not all the same number"],
    ["filter | IN | OUT | --kernel | box 3 | --origin | 3,0", "invalid-origin", "3"],
    ["explain | --kernel | delta", "usage", "--size"],
    ["explain | IN | --size | 9x9 | --kernel | delta", "usage", "already"],
    ["explain | --size | 9 | --kernel | delta", "usage", "--size"],
    ["explain | --size | 0x9 | --kernel | delta", "invalid-raster", "0"],
    ["explain | --size | 9x9 | --channels | 5 | --kernel | delta", "usage", "1, 2, 3, 4"],
  ])("%s", async (line, code, words) => {
    const people = await tapwise(...spelled(line));
    expect(people).toMatchObject({ exitCode: 2, stdout: "" });
    expect(people.stderr).toMatch(new RegExp(`^tapwise: .*\\[${code}\\]\\n$`, "s"));
    expect(people.stderr).toContain(words);
    const programs = await tapwise(...spelled(line), "--json");
    expect(programs).toMatchObject({ exitCode: 2, stderr: "" });
    const error = JSON.parse(programs.stdout);
    expect(Object.keys(error)).toEqual(["code", "fault", "message", "expected", "received"]);
    expect(error).toMatchObject({ code, fault: "caller", message: expect.stringContaining(words) });
    expect((await readdir(at())).sort()).toEqual(["folder", "leaf.png", "notes.png", "vast.png"]);
  });

  it("without a command, and shows the help", async () => {
    const { exitCode, stdout, stderr } = await tapwise();
    expect({ exitCode, stdout }).toEqual({ exitCode: 2, stdout: "" });
    expect(stderr).toContain("Usage: tapwise");
    expect(JSON.parse((await tapwise("--json")).stdout)).toMatchObject({ code: "usage" });
  });
});

describe("what fails although the command is right exits with 1 and writes nothing", () => {
  it.each([
    ["filter | @absent.png | OUT | --kernel | delta", "file-unreadable", "caller"],
    ["filter | @folder | @notes.png | --kernel | delta", "file-unwritable", "host"],
    ["filter | @folder | @absent/out | --kernel | delta", "file-unwritable", "host"],
    ["filter | @notes.png | OUT | --kernel | delta", "invalid-png", "caller"],
    ["filter | @vast.png | OUT | --kernel | delta", "invalid-png", "caller"],
    ["filter | IN | @notes.png | --kernel | delta", "file-exists", "caller"],
    ["filter | IN | @absent/out.png | --kernel | delta", "file-unwritable", "host"],
    ["filter | IN | @folder | --kernel | delta | --force", "file-unwritable", "host"],
    ["filter | IN | OUT | --kernel | @absent.json", "file-unreadable", "caller"],
    ["filter | IN | OUT | --kernel | gaussian 20 | --method | direct | --memory-limit | 64KiB", "memory-limit", "capacity"],
    ["explain | --size | 16x2000000 | --kernel | gaussian 3 | --memory-limit | 64KiB", "memory-limit", "capacity"],
    ["explain | @notes.png | --kernel | delta", "invalid-png", "caller"],
  ])("%s", async (line, code, fault) => {
    const programs = await tapwise(...spelled(line), "--json");
    expect(programs).toMatchObject({ exitCode: 1, stderr: "" });
    expect(JSON.parse(programs.stdout)).toMatchObject({ code, fault });
    const people = await tapwise(...spelled(line));
    expect(people).toMatchObject({ exitCode: 1, stdout: "", stderr: expect.stringContaining(`[${code}]`) });
    expect((await readdir(at())).sort()).toEqual(["folder", "leaf.png", "notes.png", "vast.png"]);
    expect(await readFile(at("notes.png"), "utf8")).toBe("Sheet 12: veins");
  });
});

describe("explain", () => {
  it("prints the table for a size", async () => {
    const { exitCode, stdout } = await tapwise("explain", "--size", "640x480", "--channels", "4", "--sample", "f32", "--kernel", "gaussian 3");
    expect(exitCode).toBe(0);
    expect(stdout).toContain("Kernel 25×25, origin (12, 12), sum 1, on 640×480 32-bit float RGBA");
    for (const method of ["direct", "separable", "fft", "running-sum"]) expect(stdout).toContain(method);
  });

  it("takes the layout of a PNG from its header", async () => {
    await writeFile(at("head.png"), writePng({ width: 5, height: 4, bitDepth: 16, colorType: 2, samples: patternedSamples(60, 16) }));
    const { stdout } = await tapwise("explain", at("head.png"), "--kernel", "box 3", "--json");
    expect(JSON.parse(stdout)).toMatchObject({ kernel: { width: 3, height: 3 }, layout: { width: 5, height: 4, channels: 3, sample: "u16" } });
  });

  it("gives programs the candidates, with a sentence where one is refused", async () => {
    const { stdout } = await tapwise("explain", "--size", "64x64", "--kernel", "1 2; 3 5", "--json");
    const explanation = JSON.parse(stdout);
    expect(explanation.candidates.map(({ method }: { method: string }) => method).sort()).toEqual(["direct", "fft", "running-sum", "separable"]);
    expect(explanation.candidates.find(({ method }: { method: string }) => method === "running-sum").refused).toMatch(/\.$/);
  });

  it("follows a forced method", async () => {
    const { stdout } = await tapwise("explain", "--size", "64x64", "--kernel", "box 3", "--method", "fft", "--json");
    expect(JSON.parse(stdout).method).toBe("fft");
  });
});

describe("help", () => {
  it("of the program names the commands, examples and exit codes", async () => {
    const { exitCode, stdout, stderr } = await tapwise("--help");
    expect({ exitCode, stderr }).toEqual({ exitCode: 0, stderr: "" });
    for (const words of ["filter", "explain", "measure", "Examples:", "Exit codes: 0 done"]) expect(stdout).toContain(words);
  });

  it.each(["filter", "explain"])("of %s lists every builder, border and option", async (command) => {
    const { exitCode, stdout } = await tapwise(command, "--help");
    expect(exitCode).toBe(0);
    for (const name of Object.keys(builders)) expect(stdout).toContain(`\n    ${name}`);
    for (const words of ["renormalised", "--border-rows", "--light", "--memory-limit", "running-sum", "Examples:"]) expect(stdout).toContain(words);
    for (const line of stdout.split("\n")) expect(line.length).toBeLessThanOrEqual(120);
  });

  it("of measure lists every option, and what is printed", async () => {
    const { exitCode, stdout } = await tapwise("measure", "--help");
    expect(exitCode).toBe(0);
    for (const words of ["--profile", "--report", "--no-crossover", "--sizes", "--seconds", "--threads", "regret", "Examples:"])
      expect(stdout).toContain(words);
    for (const line of stdout.split("\n")) expect(line.length).toBeLessThanOrEqual(120);
  });

  it.each(["filter", "explain", "measure"])("examples of %s are right", async (command) => {
    const { stdout } = await tapwise(command, "--help");
    const examples = [...stdout.matchAll(/^ {2}\$ tapwise (.*)$/gm)].map(([, line]) => line!);
    expect(examples.length).toBeGreaterThan(2);
    await writeExampleFiles();
    for (const example of examples) {
      const words = [...example.replace("leaf.png corner", "sheet16.png corner").matchAll(/"([^"]*)"|(\S+)/g)].map(([, quoted, bare]) => quoted ?? bare!);
      const placed = words.map((word) => (/\.(png|json|html)$|^(sheets|soft)$/.test(word) ? at(word) : word));
      const outcome = await tapwise(...placed, ...(command === "explain" ? [] : ["--force"]), ...(command === "measure" ? quickly(example) : []));
      expect({ example, ...outcome }).toMatchObject({ example, exitCode: 0 });
    }
  });
});

/** What makes an example of measure a short one; the last of an option counts. */
function quickly(example: string): string[] {
  return ["--seconds", "0.5", ...(example.includes("--no-crossover") ? [] : ["--size", "48x32", "--sizes", "3,9"])];
}

async function writeExampleFiles(): Promise<void> {
  const engine = await createEngine();
  await writeFile(at("kiosk.json"), JSON.stringify(engine.profile));
  engine.dispose();
  await writeFile(at("psf.json"), "[[0, 0.25], [0.25, 0.5]]");
  await writeFile(at("pinhole.png"), writePng({ width: 3, height: 1, bitDepth: 8, colorType: 0, samples: [12, 90, 15] }));
  await mkdir(at("sheets"));
  await writeFile(at("sheets/leaf.png"), await readFile(at("leaf.png")));
  const samples = Array.from({ length: 640 * 480 }, (_, index) => index % 65536);
  await writeFile(at("sheet16.png"), writePng({ width: 640, height: 480, bitDepth: 16, colorType: 0, samples }));
}

describe("the program", () => {
  const entry = fileURLToPath(new URL("../../src/cli/tapwise.ts", import.meta.url));
  const started = (...argv: string[]) => spawnSync(process.execPath, ["--import", "tsx", entry, ...argv], { encoding: "utf8" });

  it("tells its version", async () => {
    const { version } = JSON.parse(await readFile(packageFile, "utf8"));
    expect(started("--version")).toMatchObject({ status: 0, stdout: `${version}\n`, stderr: "" });
  });

  it("ends with the exit code", () => {
    expect(started("filter", at("leaf.png"), at("out.png"), "--kernel", "box 3")).toMatchObject({ status: 0, stderr: "" });
    expect(started("filter", at("leaf.png"), at("out.png"), "--kernel", "box 3")).toMatchObject({ status: 1, stdout: "" });
    expect(started("filter")).toMatchObject({ status: 2, stdout: "" });
  });
});
