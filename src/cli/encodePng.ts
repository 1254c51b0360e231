import { PNG } from "pngjs";
import { type Channels, ConvolutionError, type Raster } from "../index.js";
import { type Chunk, insertAfterHeader } from "./chunks.js";

type ColorType = 0 | 2 | 4 | 6;

/** PNG colour types by samples a pixel: grey, grey and alpha, colour, colour and alpha. */
const colorTypeOfChannels: Readonly<Record<Channels, ColorType>> = { 1: 0, 2: 4, 3: 2, 4: 6 };

/**
 * Writes a tight raster of 8- or 16-bit samples as a PNG of the same channels and depth, with the given chunks after its header.
 *
 * @throws ConvolutionError `not-supported` for float samples, which PNG cannot hold
 */
export function encodePng(raster: Raster & { channels: Channels }, carried: readonly Chunk[]): Uint8Array {
  const { data, width, height, channels } = raster;
  if (data instanceof Float32Array)
    throw new ConvolutionError("not-supported", "PNG holds 8- or 16-bit samples, the result has 32-bit floats. Choose --output-sample u8 or u16.", {
      expected: ["u8", "u16"],
      received: "f32",
    });
  const colorType = colorTypeOfChannels[channels];
  // The packer reads 16-bit samples from the start of the buffer under its bytes, so these must own theirs.
  const owned = data.byteLength === data.buffer.byteLength ? data : data.slice();
  const bytes = Buffer.from(owned.buffer as ArrayBuffer);
  // The packer asks for these three fields only; the class would first allocate four bytes a pixel of its own.
  const image = { width, height, data: bytes } as PNG;
  const packed = PNG.sync.write(image, {
    colorType,
    inputColorType: colorType,
    inputHasAlpha: channels % 2 === 0,
    bitDepth: data.BYTES_PER_ELEMENT === 2 ? 16 : 8,
  });
  return insertAfterHeader(packed, carried);
}
