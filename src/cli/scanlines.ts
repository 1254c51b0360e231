import { constants, inflateSync } from "node:zlib";

/** First column, first row, column step and row step of the seven passes of an interlaced image (PNG, Third Edition, §8.2). */
const passes = [
  [0, 0, 8, 8],
  [4, 0, 8, 8],
  [0, 4, 4, 8],
  [2, 0, 4, 4],
  [0, 2, 2, 4],
  [1, 0, 2, 2],
  [0, 1, 1, 2],
] as const;

const wholeImage = [[0, 0, 1, 1]] as const;

/** The bytes that an image's rows unpack to, with one byte for the filter type of each row. */
export function scanlineByteLength(width: number, height: number, bitsPerPixel: number, isInterlaced: boolean): number {
  let byteLength = 0;
  for (const [firstColumn, firstRow, columnStep, rowStep] of isInterlaced ? passes : wholeImage) {
    const columns = Math.ceil((width - firstColumn) / columnStep);
    const rows = Math.ceil((height - firstRow) / rowStep);
    if (columns > 0 && rows > 0) byteLength += rows * (1 + Math.ceil((columns * bitsPerPixel) / 8));
  }
  return byteLength;
}

/**
 * Unpacks image data to see that they are whole: the decoder's own unpacking takes missing data for memory that happens to lie about.
 * Never takes more memory than announced; packed data may hold a thousand times as much as the header says.
 *
 * @throws Error that says what is wrong with the data
 */
export function checkPackedRows(packed: Uint8Array, byteLength: number): void {
  const { length } = unpackUpTo(packed, byteLength);
  if (length < byteLength) throw new Error(`they hold ${length} bytes instead of ${byteLength}`);
}

function unpackUpTo(packed: Uint8Array, byteLength: number): Buffer {
  try {
    return inflateSync(packed, { maxOutputLength: byteLength, chunkSize: Math.max(byteLength, constants.Z_MIN_CHUNK) });
  } catch (error) {
    const isTooLarge = error instanceof RangeError && "code" in error && error.code === "ERR_BUFFER_TOO_LARGE";
    throw isTooLarge ? new Error(`they hold more than ${byteLength} bytes`, { cause: error }) : error;
  }
}
