import { readFile, readdir, writeFile } from "node:fs/promises";
import { describe, expect, it } from "vitest";
import { type Channels, type PrepareOptions, type Raster, createEngine, gaussian, kernel, sobel } from "../../src/index.js";
import type { Kernel } from "../../src/index.js";
import { define } from "../reference/definition.js";
import { tapwise } from "./commandLine.js";
import { chunk, patternedSamples, readPng, storedChannels, writePng } from "./pngFiles.js";
import { useTemporaryFolder } from "./temporaryFolder.js";

const { at } = useTemporaryFolder();
const [width, height] = [12, 10];

async function writeLeaf(colorType: number, bitDepth: number, before: Buffer[] = []): Promise<number[]> {
  const samples = patternedSamples(width * height * storedChannels[colorType]!, bitDepth);
  await writeFile(at("leaf.png"), writePng({ width, height, bitDepth, colorType, samples, before }));
  return samples;
}

async function filterLeaf(...options: string[]): Promise<ReturnType<typeof readPng>> {
  const outcome = await tapwise("filter", at("leaf.png"), at("out.png"), ...options);
  expect(outcome).toMatchObject({ exitCode: 0 });
  return readPng(await readFile(at("out.png")));
}

describe.each([0, 2, 4, 6].flatMap((colorType) => [8, 16].map((bitDepth) => ({ colorType, bitDepth }))))(
  "a PNG of colour type $colorType at $bitDepth bits",
  ({ colorType, bitDepth }) => {
    it("keeps its form and, with a delta, every sample", async () => {
      const samples = await writeLeaf(colorType, bitDepth);
      expect(await filterLeaf("--kernel", "delta", "--alpha", "none")).toMatchObject({ width, height, colorType, bitDepth, samples });
    });

    it("comes out as the library computes it, within a level of the definition", async () => {
      const samples = await writeLeaf(colorType, bitDepth);
      const data = bitDepth === 16 ? Uint16Array.from(samples) : Uint8Array.from(samples);
      const taps = gaussian({ sigma: 1 });
      const { samples: results } = await filterLeaf("--kernel", "gaussian 1");
      expect(results).toEqual([...(await convolved({ data, width, height }, taps, {})).data]);
      const defined = define({ data, width, height }, taps).written;
      expect(Math.max(...results.map((result, index) => Math.abs(result - defined[index]!)))).toBeLessThanOrEqual(1);
    });
  },
);

async function convolved(image: Raster, taps: Kernel, options: PrepareOptions): Promise<Raster> {
  const engine = await createEngine();
  try {
    const channels = (image.data.length / (image.width * image.height)) as Channels;
    const sample = image.data instanceof Uint16Array ? "u16" : "u8";
    return engine.prepare(taps, { width: image.width, height: image.height, channels, sample }, options).run(image);
  } finally {
    engine.dispose();
  }
}

const lopsided = kernel(
  [
    [0.5, 0.25, 0],
    [0.25, 0, 0],
  ],
  { origin: { x: 0, y: 1 } },
);

describe("every option reaches the library", () => {
  it.each<[string, string[], Kernel, PrepareOptions]>([
    ["border", ["--border", "whole-sample-symmetric"], gaussian(2), { border: "whole-sample-symmetric" }],
    ["constant border", ["--border", "constant 200"], gaussian(2), { border: { constant: 200 } }],
    ["constant border of each channel", ["--border", "constant 200,100,50,255"], gaussian(2), { border: { constant: [200, 100, 50, 255] } }],
    ["rows", ["--border-rows", "zero"], gaussian(2), { border: { rows: "zero" } }],
    ["columns", ["--border", "periodic", "--border-columns", "constant 7"], gaussian(2), { border: { rows: "periodic", columns: { constant: 7 } } }],
    ["full extent", ["--extent", "full"], gaussian(2), { extent: "full" }],
    ["valid extent", ["--extent", "valid"], gaussian({ sigma: 1, radius: 2 }), { extent: "valid" }],
    ["region", ["--region", "2,3,5,4"], gaussian(2), { region: { x: 2, y: 3, width: 5, height: 4 } }],
    ["method", ["--method", "fft"], gaussian(2), { method: "fft" }],
    ["tolerance", ["--tolerance", "1/4"], gaussian(2), { tolerance: 0.25 }],
    ["alpha none", ["--alpha", "none"], gaussian(2), { alpha: "none" }],
    ["alpha keep", ["--alpha", "keep"], gaussian(2), { alpha: "keep" }],
    ["alpha premultiplied", ["--alpha", "premultiplied"], gaussian(2), { alpha: "premultiplied" }],
    ["light", ["--light", "linear"], gaussian(2), { light: "linear" }],
    ["gain and offset", ["--gain", "1/8", "--offset", "-3.5e0"], gaussian(2), { output: { gain: 0.125, offset: -3.5 } }],
    ["output sample", ["--output-sample", "u16", "--gain", "257"], gaussian(2), { output: { sample: "u16", gain: 257 } }],
    ["signed results", ["--gain", "1/8", "--offset", "128"], sobel("x"), { output: { gain: 0.125, offset: 128 } }],
    ["convolution", ["--origin", "0,1"], lopsided, {}],
    ["correlation", ["--origin", "0,1", "--correlate"], lopsided, { correlate: true }],
    ["build", ["--build", "scalar"], gaussian(2), {}],
    ["memory limit", ["--memory-limit", "64MiB"], gaussian(2), {}],
  ])("%s", async (_, options, taps, meant) => {
    const samples = await writeLeaf(6, 8);
    const rows = Array.from({ length: taps.height }, (_, j) => [...taps.taps.subarray(j * taps.width, (j + 1) * taps.width)]);
    await writeFile(at("taps.json"), JSON.stringify(rows));
    const wanted = await convolved({ data: Uint8Array.from(samples), width, height }, taps, meant);
    const result = await filterLeaf("--kernel", at("taps.json"), ...options);
    expect(result).toMatchObject({ width: wanted.width, height: wanted.height, samples: [...wanted.data] });
  });

  it("and the options are not the same without them", async () => {
    await writeLeaf(6, 8);
    const plain = (await filterLeaf("--kernel", "gaussian 2")).samples;
    for (const options of [
      ["--border", "zero"],
      ["--light", "linear"],
      ["--alpha", "none"],
      ["--gain", "1/2"],
    ])
      expect((await filterLeaf("--force", "--kernel", "gaussian 2", ...options)).samples).not.toEqual(plain);
  });
});

describe("a kernel in a JSON file", () => {
  it("may have an origin", async () => {
    await writeFile(at("leaf.png"), writePng({ width: 3, height: 1, bitDepth: 8, colorType: 0, samples: [10, 20, 30] }));
    await writeFile(at("taps.json"), JSON.stringify({ taps: [[1, 0, 0]], origin: { x: 2, y: 0 } }));
    // y[c] = x[c + 2], replicated: by hand.
    expect((await filterLeaf("--kernel", at("taps.json"))).samples).toEqual([30, 30, 30]);
  });

  it.each([
    ["no JSON", "[[1, 2", "invalid-kernel"],
    ["no taps", '{ "rows": [[1]] }', "invalid-kernel"],
    ["a word", '"box 3"', "invalid-kernel"],
    ["ragged rows", "[[1, 2], [3]]", "invalid-kernel"],
    ["words for taps", '[["1"]]', "invalid-kernel"],
    ["an option of another name", '{ "taps": [[1]], "orgin": { "x": 0, "y": 0 } }', "unknown-option"],
    ["an origin outside", '{ "taps": [[1]], "origin": { "x": 1, "y": 0 } }', "invalid-origin"],
  ])("is refused with %s", async (_, text, code) => {
    await writeLeaf(0, 8);
    await writeFile(at("taps.json"), text);
    const outcome = await tapwise("filter", at("leaf.png"), at("out.png"), "--kernel", at("taps.json"), "--json");
    expect(JSON.parse(outcome.stdout)).toMatchObject({ code, fault: "caller" });
    expect(outcome.exitCode).toBe(2);
  });
});

describe("what filter says", () => {
  it("is one line with the method, the times and the place", async () => {
    await writeLeaf(2, 8);
    const { stdout, stderr } = await tapwise("filter", at("leaf.png"), at("out.png"), "--kernel", "gaussian 1", "--method", "separable");
    expect(stdout.startsWith(`${at("out.png")}: 12×10 8-bit RGB, filtered by separable`)).toBe(true);
    expect(stdout).toMatch(/; [\d.]+ ms for this first run \([\d.e-]+ ms predicted once warm\), [\d.]+ ms in all\.$/m);
    expect(stdout.split("\n")).toHaveLength(2);
    expect(stderr).toBe("");
  });

  it("names what did not stay as it was, one line each, on standard error", async () => {
    const palette = chunk("PLTE", Buffer.from([1, 2, 3, 4, 5, 6]));
    await writeFile(
      at("leaf.png"),
      writePng({ width: 2, height: 1, bitDepth: 1, colorType: 3, samples: [0, 1], before: [chunk("sRGB", Buffer.from([0])), palette] }),
    );
    const { stderr } = await tapwise("filter", at("leaf.png"), at("out.png"), "--kernel", "delta", "--output-sample", "u16");
    expect(stderr.trimEnd().split("\n")).toEqual([
      "The palette image was unpacked: the result is 8-bit RGB.",
      "Colour-space chunks carried over unchanged: sRGB. Sample values were filtered as stored.",
      "8-bit values were written to 16 bits as they are, which looks black: --gain 257 maps the whole range.",
    ]);
    const written = readPng(await readFile(at("out.png")));
    expect(written).toMatchObject({ bitDepth: 16, colorType: 2, samples: [1, 2, 3, 4, 5, 6] });
    expect(written.types).toEqual(["IHDR", "sRGB", "IDAT", "IEND"]);
  });

  it("is one object with --json, and nothing else", async () => {
    await writeLeaf(4, 16, [chunk("gAMA", Buffer.from([0, 0, 0xb1, 0x8f]))]);
    const { stdout, stderr, exitCode } = await tapwise("filter", at("leaf.png"), at("out.png"), "--kernel", "box 3", "--json");
    expect(exitCode).toBe(0);
    expect(stderr).toBe("");
    const report = JSON.parse(stdout);
    expect(report).toMatchObject({
      input: at("leaf.png"),
      output: at("out.png"),
      width,
      height,
      channels: 2,
      sample: "u16",
      notes: [expect.stringContaining("gAMA")],
    });
    expect(report.explanation.candidates.map(({ method }: { method: string }) => method)).toContain(report.explanation.method);
    expect(report.method).toBe(report.explanation.method);
    expect(report.milliseconds.run).toBeGreaterThan(0);
  });
});

describe("an output that exists", () => {
  it("stays without --force, goes with it, and may be the input", async () => {
    const samples = await writeLeaf(0, 8);
    const before = await readFile(at("leaf.png"));
    const refused = await tapwise("filter", at("leaf.png"), at("leaf.png"), "--kernel", "delta", "--json");
    expect(refused.exitCode).toBe(1);
    expect(JSON.parse(refused.stdout)).toMatchObject({ code: "file-exists", received: at("leaf.png") });
    expect(await readFile(at("leaf.png"))).toEqual(before);
    expect(await tapwise("filter", at("leaf.png"), at("leaf.png"), "--kernel", "delta", "--gain", "1/2", "--force")).toMatchObject({ exitCode: 0 });
    expect(readPng(await readFile(at("leaf.png"))).samples).toEqual(samples.map((sample) => Math.floor(sample / 2 + 0.5)));
    expect(await readdir(at())).toEqual(["leaf.png"]);
  });
});
