/** Every block starts on a cache line; so does every filter's memory. */
const alignment = 64;

function alignedTo(bytes: number, multiple: number): number {
  return Math.ceil(bytes / multiple) * multiple;
}

/**
 * A stride of an odd number of cache lines: neighbouring rows never compete for the same few places of a cache
 * (rows a power of two apart would).
 */
export function rowStride(bytes: number): number {
  const lines = Math.ceil(bytes / alignment);
  return (lines % 2 === 0 ? lines + 1 : lines) * alignment;
}

/** Lays blocks one after the other; what it hands out are offsets, so planning needs no memory. */
export class Arrangement {
  byteLength = 0;
  readonly #bytesAt = new Map<number, number>();

  take(bytes: number): number {
    const offset = this.byteLength;
    this.#bytesAt.set(offset, bytes);
    this.byteLength += alignedTo(bytes, alignment);
    return offset;
  }

  /** Another block as large as the one at `offset`. */
  takeAgain(offset: number): number {
    return this.take(this.#bytesAt.get(offset)!);
  }
}
