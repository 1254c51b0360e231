import { crc32, deflateSync, inflateSync } from "node:zlib";

/**
 * PNG files written and read from the text of the format alone (PNG, Third Edition, §5 chunks, §7.2 scanlines, §8 interlacing,
 * §9 filtering), so that the command line is not judged by the library it uses.
 */
export const signature = Buffer.from([137, 80, 78, 71, 13, 10, 26, 10]);

export function chunk(type: string, data: Uint8Array = new Uint8Array()): Buffer {
  const checked = Buffer.concat([Buffer.from(type, "latin1"), data]);
  const framed = Buffer.alloc(checked.length + 8);
  framed.writeUInt32BE(data.length, 0);
  checked.copy(framed, 4);
  framed.writeUInt32BE(crc32(checked), checked.length + 4);
  return framed;
}

export function headerChunk(width: number, height: number, bitDepth: number, colorType: number, interlace = 0): Buffer {
  const data = Buffer.alloc(13);
  data.writeUInt32BE(width, 0);
  data.writeUInt32BE(height, 4);
  data.set([bitDepth, colorType, 0, 0, interlace], 8);
  return chunk("IHDR", data);
}

export interface PngParts {
  width: number;
  height: number;
  bitDepth: number;
  colorType: number;
  /** Stored samples, row by row, interleaved, 0…2^bitDepth − 1. */
  samples: readonly number[];
  /** Chunks between IHDR and IDAT, whole. */
  before?: readonly Buffer[];
  interlaced?: boolean;
}

/** Samples a pixel as stored, by colour type (PNG, table 8). */
export const storedChannels: Readonly<Record<number, number>> = { 0: 1, 2: 3, 3: 1, 4: 2, 6: 4 };

/** First column, first row, column step and row step of the seven passes (PNG §8.2). */
const passes = [
  [0, 0, 8, 8],
  [4, 0, 8, 8],
  [0, 4, 4, 8],
  [2, 0, 4, 4],
  [0, 2, 2, 4],
  [1, 0, 2, 2],
  [0, 1, 1, 2],
] as const;

/** Writes a PNG; every row has filter type 0. */
export function writePng({ width, height, bitDepth, colorType, samples, before = [], interlaced = false }: PngParts): Buffer {
  const channels = storedChannels[colorType]!;
  const rows: Buffer[] = [];
  for (const [x0, y0, dx, dy] of interlaced ? passes : [[0, 0, 1, 1] as const]) {
    if (x0 >= width) continue;
    for (let y = y0; y < height; y += dy) {
      const row: number[] = [];
      for (let x = x0; x < width; x += dx) row.push(...samples.slice((y * width + x) * channels, (y * width + x + 1) * channels));
      rows.push(Buffer.from([0]), packRow(row, bitDepth));
    }
  }
  const header = headerChunk(width, height, bitDepth, colorType, interlaced ? 1 : 0);
  return Buffer.concat([signature, header, ...before, chunk("IDAT", deflateSync(Buffer.concat(rows))), chunk("IEND")]);
}

/** Bits from the most significant on; the last byte of a row is filled with zeros. */
function packRow(row: readonly number[], bitDepth: number): Buffer {
  const bits = row.map((sample) => sample.toString(2).padStart(bitDepth, "0")).join("");
  const byteLength = Math.ceil(bits.length / 8);
  const padded = bits.padEnd(byteLength * 8, "0");
  return Buffer.from(Array.from({ length: byteLength }, (_, index) => Number.parseInt(padded.slice(index * 8, index * 8 + 8), 2)));
}

export interface ReadPng {
  width: number;
  height: number;
  bitDepth: number;
  colorType: number;
  samples: number[];
  /** Types of all chunks in order. */
  types: string[];
  /** Data of each chunk by its type; the last of a type counts. */
  data: Record<string, Buffer>;
}

/** Reads a PNG of 8 or 16 bits that is not interlaced; throws where a checksum or an order is wrong. */
export function readPng(file: Uint8Array): ReadPng {
  const bytes = Buffer.from(file);
  if (!bytes.subarray(0, 8).equals(signature)) throw new Error("no signature");
  const types: string[] = [];
  const data: Record<string, Buffer> = {};
  const packed: Buffer[] = [];
  for (let at = 8; at < bytes.length;) {
    const byteLength = bytes.readUInt32BE(at);
    const type = bytes.toString("latin1", at + 4, at + 8);
    data[type] = bytes.subarray(at + 8, at + 8 + byteLength);
    if (crc32(bytes.subarray(at + 4, at + 8 + byteLength)) !== bytes.readUInt32BE(at + 8 + byteLength)) throw new Error(`checksum of ${type}`);
    types.push(type);
    if (type === "IDAT") packed.push(data[type]);
    at += byteLength + 12;
  }
  if (types[0] !== "IHDR" || types.at(-1) !== "IEND") throw new Error(`chunks ${types.join(" ")}`);
  const header = data["IHDR"]!;
  const [width, height, bitDepth, colorType] = [header.readUInt32BE(0), header.readUInt32BE(4), header[8]!, header[9]!];
  const bytesPerPixel = (storedChannels[colorType]! * bitDepth) / 8;
  const plain = unfilter(inflateSync(Buffer.concat(packed)), width * bytesPerPixel, height, bytesPerPixel);
  const samples = Array.from({ length: (plain.length * 8) / bitDepth }, (_, index) => (bitDepth === 16 ? plain.readUInt16BE(index * 2) : plain[index]!));
  return { width, height, bitDepth, colorType, samples, types, data };
}

/** Undoes the five filter types: a is the byte to the left, b above, c above to the left (PNG §9.2). */
function unfilter(filtered: Buffer, rowByteLength: number, height: number, bytesPerPixel: number): Buffer {
  if (filtered.length !== (rowByteLength + 1) * height) throw new Error(`${filtered.length} bytes of scanlines`);
  const plain = Buffer.alloc(rowByteLength * height);
  for (let y = 0; y < height; y++) {
    const type = filtered[y * (rowByteLength + 1)]!;
    for (let i = 0; i < rowByteLength; i++) {
      const a = i >= bytesPerPixel ? plain[y * rowByteLength + i - bytesPerPixel]! : 0;
      const b = y > 0 ? plain[(y - 1) * rowByteLength + i]! : 0;
      const c = i >= bytesPerPixel && y > 0 ? plain[(y - 1) * rowByteLength + i - bytesPerPixel]! : 0;
      const predictions = [0, a, b, Math.floor((a + b) / 2), paeth(a, b, c)];
      plain[y * rowByteLength + i] = (filtered[y * (rowByteLength + 1) + 1 + i]! + predictions[type]!) & 255;
    }
  }
  return plain;
}

/** PNG §9.4 */
function paeth(a: number, b: number, c: number): number {
  const p = a + b - c;
  const [pa, pb, pc] = [Math.abs(p - a), Math.abs(p - b), Math.abs(p - c)];
  if (pa <= pb && pa <= pc) return a;
  return pb <= pc ? b : c;
}

/** Samples that differ from their neighbours, reach both ends of the range and look like no ramp. */
export function patternedSamples(count: number, bitDepth: number): number[] {
  const full = 2 ** bitDepth - 1;
  return Array.from({ length: count }, (_, index) => (index < 2 ? index * full : (index * 40503 + 77 * index * index) % (full + 1)));
}
