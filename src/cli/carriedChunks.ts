import { type Chunk, isSafeToCopy } from "./chunks.js";

/**
 * Chunks that say how the numbers in the file stand for colours. The command line converts nothing between colour spaces,
 * so they stay as true of the result as they were of the source (PNG, Third Edition, §11.3.2).
 */
const colourSpaceTypes: ReadonlySet<string> = new Set(["gAMA", "cHRM", "sRGB", "iCCP", "cICP", "mDCV"]);

/** Transfer characteristics 13 of ITU-T H.273 is the sRGB curve (IEC 61966-2-1). */
const transferOfSrgb = 13;

/** gAMA of the sRGB curve, 1/2.2 in hundred-thousandths (PNG §11.3.2.5). */
const gammaOfSrgb = 45455;

/** Chunks of the source that belong into the result: colour space, and those the format marks as safe to copy (text, resolution, Exif, …). */
export function carriedChunks(chunks: readonly Chunk[]): Chunk[] {
  return chunks.filter((chunk) => chunk.checksumHolds && (colourSpaceTypes.has(chunk.type) || isSafeToCopy(chunk)));
}

/** One line about what became of colour-space chunks, or none where the source has none. */
export function colourSpaceNotes(chunks: readonly Chunk[], light: string | undefined): string[] {
  const found = chunks.filter(({ type }) => colourSpaceTypes.has(type));
  const names = (list: readonly Chunk[]): string => list.map(({ type }) => type).join(", ");
  const notes: string[] = [];
  const kept = found.filter(({ checksumHolds }) => checksumHolds);
  if (kept.length > 0)
    notes.push(
      `Colour-space chunks carried over unchanged: ${names(kept)}. Sample values were filtered as stored${light === "linear" ? ", through the sRGB curve" : ""}.`,
    );
  const dropped = found.filter(({ checksumHolds }) => !checksumHolds);
  if (dropped.length > 0) notes.push(`Colour-space chunks left out because their checksum is wrong: ${names(dropped)}.`);
  const others = kept.filter((chunk) => !agreesWithSrgb(chunk));
  if (light === "linear" && others.length > 0) notes.push(`--light linear decodes with the sRGB curve; ${names(others)} may say that this image has another.`);
  return notes;
}

/** True for what an sRGB image would carry; a profile (iCCP) is not opened, so it does not count as sRGB. */
function agreesWithSrgb(chunk: Chunk): boolean {
  if (chunk.type === "gAMA") return chunk.data.length === 4 && new DataView(chunk.data.buffer, chunk.data.byteOffset).getUint32(0) === gammaOfSrgb;
  if (chunk.type === "cICP") return chunk.data[1] === transferOfSrgb;
  return chunk.type === "sRGB" || chunk.type === "cHRM" || chunk.type === "mDCV";
}
