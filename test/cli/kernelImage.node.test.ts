import { readFile, writeFile } from "node:fs/promises";
import { beforeEach, describe, expect, it } from "vitest";
import { type Kernel, createEngine, kernelFromRaster } from "../../src/index.js";
import { kernelOf } from "../../src/cli/kernelArgument.js";
import { tapwise } from "./commandLine.js";
import { patternedSamples, readPng, writePng } from "./pngFiles.js";
import { useTemporaryFolder } from "./temporaryFolder.js";

const { at } = useTemporaryFolder();
const image = patternedSamples(16 * 12, 8);

/** A point of light on a level of 10: sum above it 80, centre of gravity (1.25, 1), nearest sample (1, 1). */
const point = [10, 10, 10, 10, 70, 30, 10, 10, 10];

beforeEach(async () => {
  await writeFile(at("leaf.png"), writePng({ width: 16, height: 12, bitDepth: 8, colorType: 0, samples: image }));
  await writeFile(at("point.png"), writePng({ width: 3, height: 3, bitDepth: 8, colorType: 0, samples: point }));
});

async function filtered(...options: string[]): Promise<number[]> {
  const outcome = await tapwise("filter", at("leaf.png"), at("out.png"), "--force", ...options);
  expect(outcome).toMatchObject({ exitCode: 0 });
  return readPng(await readFile(at("out.png"))).samples;
}

async function convolved(kernel: Kernel): Promise<number[]> {
  const engine = await createEngine();
  try {
    return [...engine.convolve({ data: Uint8Array.from(image), width: 16, height: 12 }, kernel).data];
  } finally {
    engine.dispose();
  }
}

const roundedTaps = ({ taps }: Kernel): number[] => [...taps].map((tap) => Number(tap.toPrecision(6)));

describe("a kernel from a PNG", () => {
  it("has the levels above the background, divided by their sum; worked by hand", async () => {
    const { kernel, notes } = await kernelOf({ kernel: at("point.png"), kernelBackground: 10 });
    expect(roundedTaps(kernel)).toEqual([0, 0, 0, 0, 0.75, 0.25, 0, 0, 0]);
    expect(kernel).toMatchObject({ width: 3, height: 3, origin: { x: 1, y: 1 } });
    expect(notes).toEqual([]);
  });

  it("filters as the same kernel written as taps", async () => {
    expect(await filtered("--kernel", at("point.png"), "--kernel-background", "10")).toEqual(await filtered("--kernel", "0 0 0; 0 3 1; 0 0 0 /4"));
  });

  it("filters as the library's own, with origin and levels as asked", async () => {
    const raster = { data: Uint8Array.from(point), width: 3, height: 3 };
    expect(await filtered("--kernel", at("point.png"))).toEqual(await convolved(kernelFromRaster(raster)));
    expect(await filtered("--kernel", at("point.png"), "--origin", "0,2")).toEqual(await convolved(kernelFromRaster(raster, { centre: { x: 0, y: 2 } })));
    const asStored = kernelFromRaster(raster, { normalise: false, background: 9.5 });
    expect(asStored.sum).toBeCloseTo(84.5, 10);
    expect(await filtered("--kernel", at("point.png"), "--kernel-as-stored", "--kernel-background", "9.5")).toEqual(await convolved(asStored));
  });

  it.each([
    ["16-bit grey", 0, 16, 257, 1],
    ["8-bit RGB", 2, 8, 1, 3],
    ["16-bit RGBA", 6, 16, 257, 4],
    ["8-bit grey with alpha", 4, 8, 1, 2],
  ])("may be %s: the same taps", async (_, colorType, bitDepth, factor, channels) => {
    const full = 2 ** bitDepth - 1;
    const hasAlpha = channels % 2 === 0;
    const samples = point.flatMap((level) => Array.from({ length: channels }, (_, c) => (hasAlpha && c === channels - 1 ? full : level * factor)));
    await writeFile(at("other.PNG"), writePng({ width: 3, height: 3, bitDepth, colorType, samples }));
    const { kernel, notes } = await kernelOf({ kernel: at("other.PNG"), kernelBackground: 10 * factor });
    expect(roundedTaps(kernel)).toEqual([0, 0, 0, 0, 0.75, 0.25, 0, 0, 0]);
    expect(notes).toEqual([]);
  });

  it("in colour or transparent is taken with a note", async () => {
    await writeFile(at("odd.png"), writePng({ width: 2, height: 1, bitDepth: 8, colorType: 6, samples: [30, 60, 90, 255, 20, 20, 20, 0] }));
    const { stderr } = await tapwise("explain", "--size", "9x9", "--kernel", at("odd.png"));
    expect(stderr).toBe(
      `${at("odd.png")} is in colour: the mean of its three channels was taken for the kernel.\n` +
        `${at("odd.png")} has transparent pixels: alpha was left out, their colours count in the kernel as stored.\n`,
    );
    expect(roundedTaps((await kernelOf({ kernel: at("odd.png") })).kernel)).toEqual([0.75, 0.25]);
  });
});

describe("a kernel that cannot be had from a PNG", () => {
  it.each([
    ["no light above the background", ["--kernel", "POINT", "--kernel-background", "200"], "invalid-raster", "Lower --kernel-background", 2],
    ["an origin outside", ["--kernel", "POINT", "--origin", "3,0"], "invalid-origin", "3", 2],
    ["a missing file", ["--kernel", "ABSENT"], "file-unreadable", "absent.png", 1],
    ["no PNG", ["--kernel", "TEXT"], "invalid-png", "text.png", 1],
    ["a background for a builder", ["--kernel", "gaussian 2", "--kernel-background", "3"], "usage", "is for a kernel from a PNG", 2],
    ["levels as stored of taps", ["--kernel", "1 2 1", "--kernel-as-stored"], "usage", "is for a kernel from a PNG", 2],
    ["a background that is no number", ["--kernel", "POINT", "--kernel-background", "dark"], "usage", "--kernel-background", 2],
  ])("%s", async (_, options, code, words, wanted) => {
    await writeFile(at("text.png"), "veins");
    const names: Record<string, string> = { POINT: at("point.png"), ABSENT: at("absent.png"), TEXT: at("text.png") };
    const { exitCode, stdout } = await tapwise("filter", at("leaf.png"), at("out.png"), ...options.map((word) => names[word] ?? word), "--json");
    expect(exitCode).toBe(wanted);
    expect(JSON.parse(stdout)).toMatchObject({ code, message: expect.stringContaining(words) });
  });
});
