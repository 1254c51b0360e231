import type { Layout, Raster } from "../index.js";
import { carriedChunks, colourSpaceNotes } from "./carriedChunks.js";
import { type Chunk, readChunks } from "./chunks.js";
import { type PngSamples, decodePixels } from "./decodePng.js";
import { type PngHeader, readHeader } from "./pngHeader.js";

/** A PNG ready to be filtered, and what goes back into the file that comes out. */
export interface SourceImage {
  raster: Raster<PngSamples>;
  layout: Required<Layout>;
  carried: Chunk[];
  /** Sentences about what will not be as it was. */
  notes: string[];
}

/** What `explain` needs of a PNG: its header, no pixels. */
export function readLayout(file: Uint8Array, name: string): Required<Layout> {
  return layoutOf(readHeader(readChunks(file, name), name));
}

/**
 * Decodes a PNG.
 *
 * @throws ConvolutionError `invalid-png`
 */
export function readImage(file: Uint8Array, name: string, light?: string): SourceImage {
  const chunks = readChunks(file, name);
  const header = readHeader(chunks, name);
  return {
    raster: decodePixels(chunks, header, name),
    layout: layoutOf(header),
    carried: carriedChunks(chunks),
    notes: [...formNotes(chunks, header), ...colourSpaceNotes(chunks, light)],
  };
}

function layoutOf({ width, height, channels, sample }: PngHeader): Required<Layout> {
  return { width, height, channels, sample };
}

const formOfChannels = { 1: "grey", 2: "grey with alpha", 3: "RGB", 4: "RGBA" } as const;

/** How people call the pixels: "16-bit RGBA". */
export function formName({ channels, sample }: Pick<Required<Layout>, "channels" | "sample">): string {
  return `${{ u8: "8-bit", u16: "16-bit", f32: "32-bit float" }[sample]} ${formOfChannels[channels]}`;
}

function formNotes(chunks: readonly Chunk[], header: PngHeader): string[] {
  const result = formName(header);
  const notes: string[] = [];
  if (header.isPalette) notes.push(`The palette image was unpacked: the result is ${result}.`);
  else if (header.bitDepth < 8)
    notes.push(`Samples of ${header.bitDepth} bit${header.bitDepth > 1 ? "s" : ""} were spread over 0…255: the result is ${result}.`);
  if (header.hasColourKey) notes.push(`The transparent colour became an alpha channel: the result is ${result}.`);
  if (chunks.some(({ type }) => type === "acTL")) notes.push("The image is animated: only its still image was filtered.");
  return notes;
}
