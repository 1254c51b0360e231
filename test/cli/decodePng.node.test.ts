import { describe, expect, it } from "vitest";
import { encodePng } from "../../src/cli/encodePng.js";
import { readImage, readLayout } from "../../src/cli/png.js";
import type { Channels } from "../../src/index.js";
import { chunk, patternedSamples, readPng, storedChannels, writePng } from "./pngFiles.js";

const depthsOfColorType: Record<number, number[]> = { 0: [8, 16], 2: [8, 16], 4: [8, 16], 6: [8, 16] };
const kept = Object.entries(depthsOfColorType).flatMap(([type, depths]) => depths.map((bitDepth) => ({ colorType: Number(type), bitDepth })));
const sizes = [
  [1, 1],
  [1, 5],
  [7, 1],
  [13, 9],
] as const;

describe.each(kept)("a PNG of colour type $colorType at $bitDepth bits", ({ colorType, bitDepth }) => {
  const channels = storedChannels[colorType]!;

  it.each(sizes.flatMap(([width, height]) => [false, true].map((interlaced) => ({ width, height, interlaced }))))(
    "is read sample for sample at $width×$height, interlaced $interlaced",
    ({ width, height, interlaced }) => {
      const samples = patternedSamples(width * height * channels, bitDepth);
      const { raster, layout, notes } = readImage(writePng({ width, height, bitDepth, colorType, samples, interlaced }), "leaf.png");
      expect([...raster.data]).toEqual(samples);
      expect(raster).toMatchObject({ width, height, channels });
      expect(layout).toEqual({ width, height, channels, sample: bitDepth === 16 ? "u16" : "u8" });
      expect(notes).toEqual([]);
    },
  );

  it.each(sizes)("is written in the same form at %i×%i", (width, height) => {
    const samples = patternedSamples(width * height * channels, bitDepth);
    const data = bitDepth === 16 ? Uint16Array.from(samples) : Uint8Array.from(samples);
    const written = readPng(encodePng({ data, width, height, channels: channels as Channels }, []));
    expect(written).toMatchObject({ width, height, bitDepth, colorType, samples });
    expect(written.types).toEqual(["IHDR", "IDAT", "IEND"]);
  });
});

it("writes the samples of a view, not those around it", () => {
  const around = Uint16Array.from([9, 9, 1, 2, 3, 4, 9]);
  expect(readPng(encodePng({ data: around.subarray(2, 6), width: 2, height: 2, channels: 1 }, [])).samples).toEqual([1, 2, 3, 4]);
});

it("refuses float samples", () => {
  expect(() => encodePng({ data: new Float32Array(1), width: 1, height: 1, channels: 1 }, [])).toThrowError(expect.objectContaining({ code: "not-supported" }));
});

describe("fewer than 8 bits", () => {
  it.each([
    // The stored value over its largest, times 255: exact in every case, as 255 is divisible by 1, 3 and 15.
    [1, 255],
    [2, 85],
    [4, 17],
  ])("at %i bits is spread over 0…255 in steps of %i, said in one line", (bitDepth, step) => {
    const samples = patternedSamples(11 * 3, bitDepth);
    const { raster, notes } = readImage(writePng({ width: 11, height: 3, bitDepth, colorType: 0, samples }), "leaf.png");
    expect([...raster.data]).toEqual(samples.map((sample) => sample * step));
    expect(notes).toHaveLength(1);
    expect(notes[0]).toContain("8-bit grey");
  });
});

describe("a palette", () => {
  const colours = [
    [10, 20, 30],
    [200, 100, 50],
    [255, 255, 255],
  ];
  const palette = chunk("PLTE", Buffer.from(colours.flat()));

  it.each([2, 4, 8])("at %i bits becomes 8-bit RGB", (bitDepth) => {
    const samples = [0, 1, 2, 2, 1, 0];
    const { raster, notes } = readImage(writePng({ width: 3, height: 2, bitDepth, colorType: 3, samples, before: [palette] }), "leaf.png");
    expect([...raster.data]).toEqual(samples.flatMap((index) => colours[index]!));
    expect(notes).toEqual(["The palette image was unpacked: the result is 8-bit RGB."]);
  });

  it("with transparent entries becomes RGBA; entries without one are opaque", () => {
    const before = [palette, chunk("tRNS", Buffer.from([0, 77]))];
    const { raster, notes } = readImage(writePng({ width: 3, height: 1, bitDepth: 8, colorType: 3, samples: [0, 1, 2], before }), "leaf.png");
    expect([...raster.data]).toEqual([10, 20, 30, 0, 200, 100, 50, 77, 255, 255, 255, 255]);
    expect(notes).toEqual(["The palette image was unpacked: the result is 8-bit RGBA."]);
  });

  it.each([
    ["is missing", []],
    ["has no such entry", [chunk("PLTE", Buffer.from([1, 2, 3]))]],
  ])("that %s is refused", (_, before) => {
    const file = writePng({ width: 1, height: 1, bitDepth: 8, colorType: 3, samples: [1], before });
    expect(() => readImage(file, "leaf.png")).toThrowError(expect.objectContaining({ code: "invalid-png" }));
  });
});

describe("a transparent colour", () => {
  it.each([
    [1, 0, [0, 1, 1], [1], [0, 255, 255, 0, 255, 0]],
    [8, 0, [3, 4, 3], [4], [3, 255, 4, 0, 3, 255]],
    [16, 0, [3, 259, 65535], [259], [3, 65535, 259, 0, 65535, 65535]],
    [8, 2, [1, 2, 3, 1, 2, 4], [1, 2, 4], [1, 2, 3, 255, 1, 2, 4, 0]],
    [16, 2, [1, 2, 300, 1, 2, 400], [1, 2, 400], [1, 2, 300, 65535, 1, 2, 400, 0]],
  ])("at %i bits, colour type %i, becomes alpha and keeps the colour", (bitDepth, colorType, samples, key, result) => {
    const data = Buffer.from(key.flatMap((value) => [value >> 8, value & 255]));
    const width = samples.length / storedChannels[colorType]!;
    const file = writePng({ width, height: 1, bitDepth, colorType, samples, before: [chunk("tRNS", data)] });
    const { raster, notes } = readImage(file, "leaf.png");
    expect([...raster.data]).toEqual(result);
    expect(notes.at(-1)).toContain("transparent colour became an alpha channel");
    expect(readLayout(file, "leaf.png").channels).toBe(raster.channels);
  });
});

it("applies no gamma", () => {
  const gamma = chunk("gAMA", Buffer.from([0, 1, 0x86, 0xa0]));
  const samples = patternedSamples(8, 8);
  expect([...readImage(writePng({ width: 8, height: 1, bitDepth: 8, colorType: 0, samples, before: [gamma] }), "leaf.png").raster.data]).toEqual(samples);
});

it("leaves what follows the end of the image alone", () => {
  const file = writePng({ width: 1, height: 1, bitDepth: 8, colorType: 0, samples: [7] });
  expect([...readImage(Buffer.concat([file, Buffer.from("more")]), "leaf.png").raster.data]).toEqual([7]);
});

it("says that only the still image of an animation is filtered", () => {
  const before = [chunk("acTL", Buffer.alloc(8))];
  const { notes, carried } = readImage(writePng({ width: 1, height: 1, bitDepth: 8, colorType: 0, samples: [7], before }), "leaf.png");
  expect(notes).toEqual(["The image is animated: only its still image was filtered."]);
  expect(carried).toEqual([]);
});
