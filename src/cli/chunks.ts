import { crc32 } from "node:zlib";
import { ConvolutionError } from "../index.js";

/** One chunk of a PNG file: four letters, its data, and the whole of it as it stands in the file. */
export interface Chunk {
  readonly type: string;
  readonly data: Uint8Array;
  /** Length, type, data and checksum. */
  readonly whole: Uint8Array;
  /** Where the chunk starts in the file, in bytes. */
  readonly byteOffset: number;
  readonly checksumHolds: boolean;
}

/** Source: PNG (Third Edition), §5.2. */
const signature = Uint8Array.of(137, 80, 78, 71, 13, 10, 26, 10);

/** Bytes around the data of a chunk: length, type and checksum. */
const frameByteLength = 12;

/**
 * Walks a PNG file from its signature to IEND; what follows IEND is left alone.
 *
 * @throws ConvolutionError `invalid-png` where the signature is another's or the file ends before IEND
 * Source: PNG (Third Edition), §5.3
 */
export function readChunks(file: Uint8Array, name: string): Chunk[] {
  if (!signature.every((byte, index) => file[index] === byte)) throw notPng(file, name);
  const view = new DataView(file.buffer, file.byteOffset, file.byteLength);
  const chunks: Chunk[] = [];
  let byteOffset = signature.length;
  while (chunks.at(-1)?.type !== "IEND") {
    const left = file.length - byteOffset;
    const needed = left < frameByteLength ? frameByteLength : view.getUint32(byteOffset) + frameByteLength;
    if (left < needed) throw truncated(name, file.length, byteOffset + needed);
    chunks.push(chunkAt(file, view, byteOffset, needed));
    byteOffset += needed;
  }
  return chunks;
}

function chunkAt(file: Uint8Array, view: DataView, byteOffset: number, byteLength: number): Chunk {
  const whole = file.subarray(byteOffset, byteOffset + byteLength);
  const checked = whole.subarray(4, byteLength - 4);
  return {
    type: String.fromCharCode(...checked.subarray(0, 4)),
    data: checked.subarray(4),
    whole,
    byteOffset,
    checksumHolds: crc32(checked) === view.getUint32(byteOffset + byteLength - 4),
  };
}

/** A chunk a decoder must understand: the first letter is a capital (PNG §5.4). */
export function isCritical(chunk: Chunk): boolean {
  return (chunk.type.charCodeAt(0) & 0x20) === 0;
}

/** A chunk an editor may copy after it changed the pixels: the fourth letter is small (PNG §5.4). */
export function isSafeToCopy(chunk: Chunk): boolean {
  return !isCritical(chunk) && (chunk.type.charCodeAt(3) & 0x20) !== 0;
}

/** Puts chunks between IHDR and the rest: the place where every ancillary chunk that is carried over may stand (PNG §5.6). */
export function insertAfterHeader(file: Uint8Array, chunks: readonly Chunk[]): Uint8Array {
  const headerEnd = signature.length + frameByteLength + 13;
  return Buffer.concat([file.subarray(0, headerEnd), ...chunks.map(({ whole }) => whole), file.subarray(headerEnd)]);
}

/** A PNG file of the given chunks. */
export function joinChunks(chunks: readonly Chunk[]): Buffer {
  return Buffer.concat([signature, ...chunks.map(({ whole }) => whole)]);
}

function notPng(file: Uint8Array, name: string): ConvolutionError {
  const found = file.length === 0 ? "it is empty" : `it starts with the bytes ${[...file.subarray(0, signature.length)].join(" ")}`;
  return new ConvolutionError("invalid-png", `${name} is not a PNG: ${found}, a PNG with ${signature.join(" ")}. Convert the image to PNG first.`, {
    expected: [...signature],
    received: [...file.subarray(0, signature.length)],
  });
}

function truncated(name: string, found: number, needed: number): ConvolutionError {
  return new ConvolutionError("invalid-png", `${name} is cut short: ${found} bytes were found where at least ${needed} were announced. Copy the file again.`, {
    expected: `at least ${needed} bytes`,
    received: `${found} bytes`,
  });
}
