import { PNG } from "pngjs";
import { type Channels, ConvolutionError, type Raster } from "../index.js";
import { type Chunk, isCritical, joinChunks } from "./chunks.js";
import { type PngHeader, broken } from "./pngHeader.js";
import { checkPackedRows } from "./scanlines.js";

/** Samples a pixel in what the decoder hands out, whatever the file has. */
const unpackedChannels = 4;

/** The chunks that decide pixels; all others are kept from the decoder. */
const pixelTypes: ReadonlySet<string> = new Set(["IHDR", "PLTE", "IDAT", "IEND"]);

export type PngSamples = Uint8Array<ArrayBuffer> | Uint16Array<ArrayBuffer>;

/**
 * Unpacks the pixels to as many channels as the header tells, 8 bits a sample or 16, no gamma applied.
 *
 * Samples of 1, 2 and 4 bits are spread over 0…255: v · 255 / (2^bits − 1), rounded.
 * A colour key becomes alpha 0 where it matches and leaves the colours alone, so that a filter that ignores alpha still sees them.
 *
 * @throws ConvolutionError `invalid-png`
 */
export function decodePixels(chunks: readonly Chunk[], header: PngHeader, name: string): Raster<PngSamples> {
  checkCriticalChunks(chunks, name);
  const unpacked = unpack(chunks, header, name);
  const { width, height, channels } = header;
  const data = pickChannels(unpacked, width * height, channels);
  if (header.hasColourKey) applyColourKey(data, chunks, header, name);
  return { data, width, height, channels };
}

/** Of red, green, blue and alpha, those that the image has; grey stands in red. */
function pickChannels(unpacked: PngSamples, pixelCount: number, channels: Channels): PngSamples {
  if (channels === unpackedChannels) return unpacked;
  const places = channels === 3 ? [0, 1, 2] : [0, 3];
  const data = unpacked instanceof Uint16Array ? new Uint16Array(pixelCount * channels) : new Uint8Array(pixelCount * channels);
  for (let channel = 0; channel < channels; channel++) {
    const place = places[channel]!;
    for (let pixel = 0; pixel < pixelCount; pixel++) data[pixel * channels + channel] = unpacked[pixel * unpackedChannels + place]!;
  }
  return data;
}

function checkCriticalChunks(chunks: readonly Chunk[], name: string): void {
  for (const chunk of chunks) {
    if (!isCritical(chunk)) continue;
    if (!pixelTypes.has(chunk.type)) throw broken(name, `chunk ${chunk.type} must be understood and is not part of PNG`, [...pixelTypes], chunk.type);
    if (!chunk.checksumHolds)
      throw broken(name, `the checksum of chunk ${chunk.type} at byte ${chunk.byteOffset} is wrong`, "the checksum of the data", "another");
  }
}

function unpack(chunks: readonly Chunk[], header: PngHeader, name: string): PngSamples {
  const wanted = chunks.filter(({ type }) => pixelTypes.has(type) || (header.isPalette && type === "tRNS"));
  const packed = wanted.filter(({ type }) => type === "IDAT").map((chunk) => chunk.data);
  try {
    checkPackedRows(Buffer.concat(packed), header.unpackedByteLength);
    // At 16 bits the decoder returns a Uint16Array when told not to rescale; fewer than 8 bits must be rescaled.
    const { data } = PNG.sync.read(joinChunks(wanted), { checkCRC: false, skipRescale: header.bitDepth === 16 });
    return plainSamples(data);
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    throw new ConvolutionError("invalid-png", `${name} is a damaged PNG: its image data do not unpack (${reason}). Export or copy the file again.`, {
      expected: `${header.width}×${header.height} pixels`,
      received: reason,
      cause: error,
    });
  }
}

/** The decoder's Buffer (8 bits) as the plain array under it; its Uint16Array as it is. */
function plainSamples(data: Buffer | Uint16Array): PngSamples {
  const { buffer, byteOffset, length } = data as { buffer: ArrayBuffer; byteOffset: number; length: number };
  return data instanceof Uint16Array ? new Uint16Array(buffer, byteOffset, length) : new Uint8Array(buffer, byteOffset, length);
}

/** tRNS of a grey or colour image: one colour, in the file's own depth, that is transparent (PNG §11.3.1.1). */
function applyColourKey(data: PngSamples, chunks: readonly Chunk[], header: PngHeader, name: string): void {
  const { channels, bitDepth } = header;
  const colours = channels - 1;
  const key = chunks.find(({ type }) => type === "tRNS")!.data;
  if (key.length !== 2 * colours) throw broken(name, `its tRNS chunk has ${key.length} bytes`, 2 * colours, key.length);
  const largest = 2 ** bitDepth - 1;
  const full = header.sample === "u16" ? 65535 : 255;
  const wanted = Array.from({ length: colours }, (_, colour) => spread((key[2 * colour] * 256 + key[2 * colour + 1]) % (largest + 1), largest, full));
  for (let first = 0; first < data.length; first += channels)
    data[first + colours] = wanted.every((value, colour) => data[first + colour] === value) ? 0 : full;
}

function spread(value: number, largest: number, full: number): number {
  return Math.floor((value * full) / largest + 0.5);
}
