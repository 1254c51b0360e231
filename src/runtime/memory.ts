import { ConvolutionError } from "../errors.js";
import type { Samples, SampleType } from "../types.js";
import type { Table } from "./program.js";

export const pageBytes = 65536;

/** What 32-bit addresses reach, less a page that stays out of reach so that sums of addresses cannot wrap. */
export const mostBytes = 65536 * pageBytes - pageBytes;

/** The first bytes stay empty: 0 stands for "no table" in the core. */
const firstAddress = 64;

/** Pages of the largest memory; a core that is linked with a shared one must name a maximum (runtime/sharedForm), and this is it. */
export const mostPages = 65536;

/**
 * A memory that threads share. Its room is reserved at once, which not every host can do for all that can be addressed: then the half, and so on.
 * Nothing where the host lets nobody share memory: a page that is not cross-origin isolated, for one.
 */
export function sharedMemory(limit: number): WebAssembly.Memory | undefined {
  if (typeof SharedArrayBuffer !== "function") return undefined;
  for (let maximum = Math.min(mostPages, Math.ceil(limit / pageBytes) + 1); maximum > 1; maximum = Math.floor(maximum / 2)) {
    try {
      return new WebAssembly.Memory({ initial: 1, maximum, shared: true });
    } catch {
      continue;
    }
  }
  return undefined;
}

interface Block {
  address: number;
  byteLength: number;
}

/**
 * The engine's memory: the only place that touches its buffer.
 *
 * Policy. One block a filter and one a view, given back by `dispose`; the smallest free block that is large enough is cut, neighbours that
 * are free become one again, and only where none fits does the memory grow, by whole pages. It never shrinks. DEVELOPERS.md says more.
 */
export class EngineMemory {
  readonly memory: WebAssembly.Memory;
  readonly limit: number;
  #free: Block[] = [];
  #end = firstAddress;
  #buffer: ArrayBufferLike;
  #bytes: Uint8Array;
  #words: Uint16Array;
  #floats: Float32Array;
  #integers: Int32Array;
  /** The buffers that the memory had: shared ones that it has outgrown still show it. */
  readonly #buffers = new WeakSet<ArrayBufferLike>();

  constructor(limit: number, memory = new WebAssembly.Memory({ initial: 1 })) {
    this.limit = limit;
    this.memory = memory;
    this.#buffer = this.memory.buffer;
    this.#bytes = new Uint8Array(this.#buffer);
    this.#words = new Uint16Array(this.#buffer);
    this.#floats = new Float32Array(this.#buffer);
    this.#integers = new Int32Array(this.#buffer);
    this.#buffers.add(this.#buffer);
  }

  /** Bytes of the memory as the host sees it. */
  get byteLength(): number {
    return this.memory.buffer.byteLength;
  }

  /** The largest block that can be taken now. */
  get largestBlock(): number {
    const last = this.#free.at(-1);
    const tail = last && last.address + last.byteLength === this.#end ? last.byteLength : 0;
    return Math.max(0, this.limit - this.#end + tail, ...this.#free.map((block) => block.byteLength));
  }

  /**
   * Takes a block, cleared.
   *
   * @throws ConvolutionError `memory-limit` (the engine's own limit), `memory-exhausted` (the host gives no more)
   */
  take(byteLength: number): number {
    const index = this.#smallestThatFits(byteLength);
    if (index < 0) return this.#extend(byteLength);
    const block = this.#free[index]!;
    const { address } = block;
    block.address += byteLength;
    block.byteLength -= byteLength;
    if (block.byteLength === 0) this.#free.splice(index, 1);
    this.#clear(address, byteLength);
    return address;
  }

  #smallestThatFits(byteLength: number): number {
    let best = -1;
    for (const [index, block] of this.#free.entries()) {
      if (block.byteLength >= byteLength && (best < 0 || block.byteLength < this.#free[best]!.byteLength)) best = index;
    }
    return best;
  }

  #extend(byteLength: number): number {
    const last = this.#free.at(-1);
    const adjoining = last && last.address + last.byteLength === this.#end;
    const address = adjoining ? last.address : this.#end;
    const end = address + byteLength;
    if (end > this.limit) throw memoryError("memory-limit", byteLength, this.largestBlock);
    const missing = Math.ceil((end - this.byteLength) / pageBytes);
    if (missing > 0) this.#grow(missing, byteLength);
    if (adjoining) this.#free.pop();
    this.#end = end;
    this.#clear(address, byteLength);
    return address;
  }

  #grow(pages: number, byteLength: number): void {
    try {
      this.memory.grow(pages);
    } catch (cause) {
      throw memoryError("memory-exhausted", byteLength, this.byteLength - this.#end, cause);
    }
  }

  /** Gives a block back. */
  release(address: number, byteLength: number): void {
    const next = this.#free.findIndex((block) => block.address > address);
    const index = next < 0 ? this.#free.length : next;
    this.#free.splice(index, 0, { address, byteLength });
    this.#join(index);
    this.#join(index - 1);
  }

  /** Makes one block of two that touch. */
  #join(index: number): void {
    const block = this.#free[index];
    const after = this.#free[index + 1];
    if (!block || !after || block.address + block.byteLength !== after.address) return;
    block.byteLength += after.byteLength;
    this.#free.splice(index + 1, 1);
  }

  /** Views are made anew only when the memory has grown. */
  #refresh(): void {
    if (this.#buffer === this.memory.buffer) return;
    this.#buffer = this.memory.buffer;
    this.#bytes = new Uint8Array(this.#buffer);
    this.#words = new Uint16Array(this.#buffer);
    this.#floats = new Float32Array(this.#buffer);
    this.#integers = new Int32Array(this.#buffer);
    this.#buffers.add(this.#buffer);
  }

  #clear(address: number, byteLength: number): void {
    this.#refresh();
    this.#bytes.fill(0, address, address + byteLength);
  }

  #viewFor(samples: Samples): Samples {
    this.#refresh();
    return samples.BYTES_PER_ELEMENT === 1 ? this.#bytes : samples.BYTES_PER_ELEMENT === 2 ? this.#words : this.#floats;
  }

  /** Copies samples into the memory. */
  stage(samples: Samples, address: number): void {
    this.#viewFor(samples).set(samples, address / samples.BYTES_PER_ELEMENT);
  }

  /** A view of `count` samples in the memory, of the type of `like`; gone when the memory grows. */
  window(like: Samples, address: number, count: number): Samples {
    const start = address / like.BYTES_PER_ELEMENT;
    return this.#viewFor(like).subarray(start, start + count);
  }

  /** A view of `count` samples of a type, as `window`. */
  samplesAt(sample: SampleType, address: number, count: number): Samples {
    this.#refresh();
    const view = sample === "u8" ? this.#bytes : sample === "u16" ? this.#words : this.#floats;
    const start = address / view.BYTES_PER_ELEMENT;
    return view.subarray(start, start + count);
  }

  /** The same as an image: bytes in the array that `ImageData` takes. */
  imageAt(sample: SampleType, address: number, count: number): Samples {
    this.#refresh();
    return sample === "u8" ? new Uint8ClampedArray(this.#buffer, address, count) : this.samplesAt(sample, address, count);
  }

  /** False for arrays of other memory, and for those that the memory has left behind as it grew. */
  isCurrent(samples: Samples): boolean {
    this.#refresh();
    return samples.buffer === this.#buffer;
  }

  /** Where an array lies in the memory; nothing where it lies elsewhere. */
  addressOf(samples: Samples): number | undefined {
    this.#refresh();
    return this.#buffers.has(samples.buffer) ? samples.byteOffset : undefined;
  }

  storeInteger(address: number, value: number): void {
    this.#refresh();
    this.#integers[address >>> 2] = value;
  }

  /** Writes a program's tables for a filter whose block starts at `base`. */
  writeTables(tables: readonly Table[], base: number): void {
    this.#refresh();
    for (const { offset, data, addresses } of tables) {
      this.#bytes.set(new Uint8Array(data.buffer, data.byteOffset, data.byteLength), base + offset);
      if (!addresses) continue;
      const integers = new Int32Array(this.#buffer, base + offset, data.length);
      if (addresses === "all") for (let k = 0; k < integers.length; k++) integers[k]! += base;
      else for (const k of addresses) integers[k]! += base;
    }
  }
}

function memoryError(code: "memory-limit" | "memory-exhausted", needed: number, available: number, cause?: unknown): ConvolutionError {
  const mebibytes = (bytes: number): string => `${(bytes / 1048576).toFixed(2)} MiB`;
  const who = code === "memory-limit" ? "The engine's memoryLimit leaves" : "The host gives";
  const advice =
    code === "memory-limit"
      ? "Raise memoryLimit, dispose filters that are not needed, or filter by regions."
      : "Dispose filters that are not needed, or filter by regions.";
  return new ConvolutionError(
    code,
    `The filter needs ${mebibytes(needed)} (${needed} bytes) in one piece. ${who} ${mebibytes(available)} (${available} bytes). ${advice}`,
    {
      expected: `at most ${available} bytes`,
      received: needed,
      cause,
    },
  );
}
