import { deflateSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { readImage } from "../../src/cli/png.js";
import { pixelLimit } from "../../src/cli/pngHeader.js";
import { ConvolutionError } from "../../src/index.js";
import { chunk, headerChunk, patternedSamples, signature, writePng } from "./pngFiles.js";

function errorOf(file: Uint8Array): ConvolutionError {
  try {
    readImage(file, "leaf.png");
  } catch (error) {
    if (error instanceof ConvolutionError) return error;
    throw error;
  }
  throw new Error("the file was read");
}

const file = writePng({ width: 16, height: 16, bitDepth: 8, colorType: 2, samples: patternedSamples(16 * 16 * 3, 8) });

/** A file with the given header and image data, those of 4×4 grey bytes unless given; whole but for what these say. */
function withParts(header: Buffer, data: Uint8Array = deflateSync(Buffer.alloc(20)), ...extra: Buffer[]): Buffer {
  return Buffer.concat([signature, header, ...extra, chunk("IDAT", data), chunk("IEND")]);
}

describe("a file that is no whole PNG is refused with invalid-png", () => {
  it("wherever it is cut", () => {
    for (let byteLength = 0; byteLength < file.length; byteLength++) {
      const error = errorOf(file.subarray(0, byteLength));
      expect(error.code).toBe("invalid-png");
      expect(error.message).toContain("leaf.png");
    }
  });

  it("when any one byte is another, or reads as the same image", () => {
    const whole = readImage(file, "leaf.png").raster.data;
    for (let at = 0; at < file.length; at++) {
      const changed = Buffer.from(file);
      changed[at] = changed[at]! ^ 0x20;
      const outcome = ((): string => {
        try {
          return Buffer.compare(readImage(changed, "leaf.png").raster.data as Uint8Array, whole as Uint8Array) === 0 ? "same" : "different";
        } catch (error) {
          return error instanceof ConvolutionError ? error.code : String(error);
        }
      })();
      expect(["invalid-png", "same"], `byte ${at}`).toContain(outcome);
    }
  });

  it.each([
    ["an empty file", Buffer.alloc(0), "it is empty"],
    ["another format", Buffer.from("\xff\xd8\xff\xe0 JFIF", "latin1"), "starts with the bytes 255 216"],
    ["a width of 0", withParts(headerChunk(0, 4, 8, 0)), "0×4"],
    ["a height of 0", withParts(headerChunk(4, 0, 8, 0)), "4×0"],
    ["RGB at 4 bits", withParts(headerChunk(4, 4, 4, 2)), "colour type 2 at 4 bits"],
    ["colour type 5", withParts(headerChunk(4, 4, 8, 5)), "colour type 5"],
    ["a header of 12 bytes", withParts(chunk("IHDR", Buffer.alloc(12))), "IHDR"],
    ["another chunk first", Buffer.concat([signature, chunk("IDAT"), chunk("IEND")]), "IHDR"],
    ["a critical chunk of another kind", withParts(headerChunk(4, 4, 8, 0), undefined, chunk("QRST")), "QRST"],
    ["no image data", Buffer.concat([signature, headerChunk(4, 4, 8, 0), chunk("IEND")]), "0 compressed bytes"],
    ["image data that end early", withParts(headerChunk(40, 40, 8, 0), deflateSync(Buffer.alloc(100))), "100 bytes instead of 1640"],
    ["image data that go on", withParts(headerChunk(4, 4, 8, 0), deflateSync(Buffer.alloc(1000))), "more than"],
    ["interlaced image data that go on", withParts(headerChunk(4, 4, 8, 0, 1), deflateSync(Buffer.alloc(1000))), "more than"],
    ["a compressed stream cut short", withParts(headerChunk(4, 4, 8, 0), deflateSync(Buffer.alloc(20)).subarray(0, -5)), "do not unpack"],
    ["image data that are none", withParts(headerChunk(4, 4, 8, 0), Buffer.from("no deflate stream at all")), "do not unpack"],
    ["a filter type of 9", withParts(headerChunk(1, 1, 8, 0), deflateSync(Buffer.from([9, 0]))), "filter type"],
    ["a transparent colour of one byte", withParts(headerChunk(4, 4, 8, 0), undefined, chunk("tRNS", Buffer.alloc(1))), "tRNS"],
  ])("when it is %s", (_, damaged, words) => {
    const error = errorOf(damaged);
    expect(error).toMatchObject({ code: "invalid-png", fault: "caller" });
    expect(error.message).toContain(words);
    expect(error.expected).toBeDefined();
    expect(error.received).toBeDefined();
  });
});

describe("an image that is too big is refused from its header", () => {
  it.each([
    [2 ** 31 - 1, 2 ** 31 - 1],
    [2 ** 14, pixelLimit / 2 ** 14 + 1],
    [2 ** 25, 1],
  ])("at %i×%i", (width, height) => {
    const error = errorOf(withParts(headerChunk(width, height, 16, 6)));
    expect(error.code).toBe("invalid-png");
    expect(error.message).toContain("too big");
    expect(error.received).toEqual({ width, height });
  });

  it("and so is one that its data could never fill, before memory is taken", () => {
    const before = process.memoryUsage().arrayBuffers;
    const error = errorOf(withParts(headerChunk(2 ** 13, 2 ** 14, 16, 6)));
    expect(error.code).toBe("invalid-png");
    expect(error.message).toContain("compressed bytes, too few");
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(2 ** 24);
  });
});
