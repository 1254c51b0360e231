import { describe, expect, it } from "vitest";
import { encodePng } from "../../src/cli/encodePng.js";
import { readImage } from "../../src/cli/png.js";
import { chunk, patternedSamples, readPng, writePng } from "./pngFiles.js";

const gamma = (hundredThousandths: number): Buffer => {
  const data = Buffer.alloc(4);
  data.writeUInt32BE(hundredThousandths);
  return chunk("gAMA", data);
};
const cHRM = chunk("cHRM", Buffer.from(patternedSamples(32, 8)));
const iCCP = chunk("iCCP", Buffer.from("press\0\0profile", "latin1"));
const sRGB = chunk("sRGB", Buffer.from([0]));
const cICP = chunk("cICP", Buffer.from([9, 16, 0, 1]));

function imageWith(before: readonly Buffer[], light?: string): ReturnType<typeof readImage> {
  return readImage(writePng({ width: 2, height: 1, bitDepth: 8, colorType: 0, samples: [1, 2], before }), "leaf.png", light);
}

describe("chunks of the source in the result", () => {
  it("keep their bytes and stand before the image data", () => {
    const before = [
      gamma(100000),
      cHRM,
      iCCP,
      cICP,
      chunk("pHYs", Buffer.alloc(9, 3)),
      chunk("tEXt", Buffer.from("Title\0Sheet 12")),
      chunk("eXIf", Buffer.from("MM")),
    ];
    const { raster, carried } = imageWith(before);
    const written = readPng(encodePng({ ...raster, channels: 1 }, carried));
    expect(written.types).toEqual(["IHDR", "gAMA", "cHRM", "iCCP", "cICP", "pHYs", "tEXt", "eXIf", "IDAT", "IEND"]);
    for (const whole of before) expect(written.data[whole.toString("latin1", 4, 8)]).toEqual(whole.subarray(8, -4));
    expect(written.samples).toEqual([1, 2]);
  });

  it("are not those that describe the source's own pixels", () => {
    const before = [chunk("sBIT", Buffer.from([5])), chunk("bKGD", Buffer.alloc(2)), chunk("tIME", Buffer.alloc(7)), chunk("hIST", Buffer.alloc(2))];
    expect(imageWith(before).carried).toEqual([]);
  });

  it("are not those with a wrong checksum, which is said", () => {
    const broken = Buffer.from(sRGB);
    broken[8] = 1;
    const { carried, notes } = imageWith([broken, gamma(45455)]);
    expect(carried.map(({ type }) => type)).toEqual(["gAMA"]);
    expect(notes).toEqual([expect.stringContaining("carried over unchanged: gAMA"), expect.stringContaining("checksum is wrong: sRGB")]);
  });
});

describe("what is said about colour space", () => {
  it("is nothing where the source says nothing", () => expect(imageWith([chunk("tEXt", Buffer.from("Title\0Leaf"))]).notes).toEqual([]));

  it("is one line with the names", () => expect(imageWith([sRGB, gamma(45455)]).notes).toEqual([expect.stringContaining("sRGB, gAMA")]));

  it.each([
    ["gAMA of a linear image", gamma(100000), "gAMA"],
    ["a profile", iCCP, "iCCP"],
    ["cICP of PQ", cICP, "cICP"],
  ])("warns that linear light uses the sRGB curve with %s", (_, whole, name) => {
    expect(imageWith([whole], "linear").notes.at(-1)).toBe(`--light linear decodes with the sRGB curve; ${name} may say that this image has another.`);
    expect(imageWith([whole], "encoded").notes).toHaveLength(1);
  });

  it.each([
    ["sRGB", sRGB],
    ["gAMA of sRGB", gamma(45455)],
    ["cICP of sRGB", chunk("cICP", Buffer.from([1, 13, 0, 1]))],
  ])("does not warn with %s", (_, whole) => expect(imageWith([whole], "linear").notes).toHaveLength(1));
});
