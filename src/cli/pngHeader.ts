import { type Channels, ConvolutionError, type SampleType } from "../index.js";
import type { Chunk } from "./chunks.js";
import { scanlineByteLength } from "./scanlines.js";

/** Bits of the colour type (PNG §11.2.1). */
const paletteBit = 1;
const colourBit = 2;
const alphaBit = 4;

/** Bit depths that each colour type may have (PNG, table 12). */
const depthsOfColorType: Readonly<Record<number, readonly number[]>> = {
  0: [1, 2, 4, 8, 16],
  2: [8, 16],
  3: [1, 2, 4, 8],
  4: [8, 16],
  6: [8, 16],
};

/** The decoder unpacks every pixel to four samples: 2²⁷ pixels are 2²⁹ samples, 1 GiB at 16 bits. */
export const pixelLimit = 2 ** 27;

/** The decoder counts the bits of a row in 32-bit integers; a row of this many pixels stays below 2³¹ bits at 64 bits a pixel. */
const columnLimit = 2 ** 24;

/** Deflate shrinks by 1032 at most: a block of 258 equal bytes takes two bits (Deutsch, RFC 1951, §3.2.5). */
const largestCompression = 1032;

export interface PngHeader {
  readonly width: number;
  readonly height: number;
  readonly bitDepth: number;
  readonly colorType: number;
  readonly isPalette: boolean;
  /** Samples a pixel once unpacked: palette entries become red, green and blue; a tRNS chunk becomes an alpha channel. */
  readonly channels: Channels;
  /** What the samples become: 8 bits up to 8, else 16. */
  readonly sample: Extract<SampleType, "u8" | "u16">;
  /** What the image data unpack to. */
  readonly unpackedByteLength: number;
  readonly hasColourKey: boolean;
}

/**
 * Reads IHDR and checks it, before anything is decoded.
 *
 * @throws ConvolutionError `invalid-png` where the header breaks the format, declares more than 2²⁷ pixels, or more than the file can hold
 */
export function readHeader(chunks: readonly Chunk[], name: string): PngHeader {
  const [header] = chunks;
  if (header?.type !== "IHDR" || header.data.length !== 13) throw broken(name, "its first chunk is not a 13-byte IHDR", "IHDR, 13 bytes", header?.type);
  const view = new DataView(header.data.buffer, header.data.byteOffset, 13);
  const [width, height] = [view.getUint32(0), view.getUint32(4)];
  const [bitDepth, colorType] = [view.getUint8(8), view.getUint8(9)];
  if (!depthsOfColorType[colorType]?.includes(bitDepth))
    throw broken(name, `colour type ${colorType} at ${bitDepth} bits does not exist`, depthsOfColorType, { colorType, bitDepth });
  checkDimensions(name, width, height);
  const isPalette = (colorType & paletteBit) !== 0;
  const storesAlpha = (colorType & alphaBit) !== 0;
  const hasTransparency = chunks.some(({ type }) => type === "tRNS");
  const colours = (colorType & colourBit) !== 0 ? 3 : 1;
  const isInterlaced = view.getUint8(12) === 1;
  const storedChannels = isPalette ? 1 : colours + (storesAlpha ? 1 : 0);
  const unpackedByteLength = scanlineByteLength(width, height, bitDepth * storedChannels, isInterlaced);
  checkAgainstData(name, chunks, unpackedByteLength);
  return {
    width,
    height,
    bitDepth,
    colorType,
    isPalette,
    channels: (colours + (storesAlpha || hasTransparency ? 1 : 0)) as Channels,
    sample: bitDepth === 16 ? "u16" : "u8",
    unpackedByteLength,
    hasColourKey: !isPalette && !storesAlpha && hasTransparency,
  };
}

function checkDimensions(name: string, width: number, height: number): void {
  if (width === 0 || height === 0) throw broken(name, `it declares ${width}×${height} pixels`, "at least 1×1", `${width}×${height}`);
  if (width * height > pixelLimit || width > columnLimit)
    throw new ConvolutionError(
      "invalid-png",
      `${name} is too big: it declares ${width}×${height} pixels; the command line reads up to ${pixelLimit} pixels, ${columnLimit} a row. Cut it into parts, or use the library on raw samples.`,
      { expected: { pixels: pixelLimit, columns: columnLimit }, received: { width, height } },
    );
}

/** Refuses a header that promises more pixels than the compressed data could ever unpack to, before memory is taken for them. */
function checkAgainstData(name: string, chunks: readonly Chunk[], unpackedByteLength: number): void {
  const packedByteLength = chunks.filter(({ type }) => type === "IDAT").reduce((sum, { data }) => sum + data.length, 0);
  if (packedByteLength * largestCompression < unpackedByteLength)
    throw broken(
      name,
      `it declares ${unpackedByteLength} bytes of pixels but holds ${packedByteLength} compressed bytes, too few for that`,
      `at least ${Math.ceil(unpackedByteLength / largestCompression)} bytes of image data`,
      `${packedByteLength} bytes`,
    );
}

/** A PNG that breaks its format: says how. */
export function broken(name: string, how: string, expected: unknown, received: unknown): ConvolutionError {
  return new ConvolutionError("invalid-png", `${name} is a damaged PNG: ${how}. Export or copy the file again.`, { expected, received });
}
