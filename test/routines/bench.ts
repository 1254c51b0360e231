import { code as scalarCode } from "../../src/generated/scalar.js";
import { code as simdCode } from "../../src/generated/simd.js";
import { bytesOfHex } from "../../src/api/hex.js";
import { RECORD_BYTES } from "../../src/generated/record.js";
import type { Routines } from "../../src/runtime/routines.js";

type Typed = Uint8Array | Uint16Array | Int32Array | Float32Array;
type TypedConstructor<T extends Typed> = { new (buffer: ArrayBufferLike, byteOffset: number, length: number): T; readonly BYTES_PER_ELEMENT: number };

/** Every block has this many bytes of a known pattern before and behind it. */
const guardBytes = 64;
const guardByte = 0xa5;

/** A job record in memory: fields by the offsets that core and host share. */
export interface Job {
  address: number;
  integer(field: number, value: number): Job;
  float(field: number, value: number): Job;
}

/**
 * A small memory for routines to work in: blocks by hand, each between two guards, so that a write past a block's end is found.
 * The first bytes stay free, since 0 stands for "no table".
 */
export class Bench {
  readonly memory = new WebAssembly.Memory({ initial: 64 });
  readonly #blocks: { address: number; byteLength: number }[] = [];
  #end = 4096;

  /** A block of zeros, on a multiple of 64 bytes plus `misaligned`. */
  take(byteLength: number, misaligned = 0): number {
    const address = this.#end + guardBytes + misaligned;
    const end = address + byteLength + guardBytes;
    if (end > this.memory.buffer.byteLength) throw new RangeError(`The bench has no ${byteLength} bytes left.`);
    new Uint8Array(this.memory.buffer, this.#end, end - this.#end).fill(guardByte);
    new Uint8Array(this.memory.buffer, address, byteLength).fill(0);
    this.#blocks.push({ address, byteLength });
    this.#end = Math.ceil(end / 64) * 64;
    return address;
  }

  /** A block that holds these numbers; `slackBytes` more are readable behind them, floats of NaN that no result may depend on. */
  place(values: Typed, { slackBytes = 0, misaligned = 0 } = {}): number {
    const address = this.take(values.byteLength + slackBytes, misaligned);
    new Uint8Array(this.memory.buffer, address, values.byteLength).set(new Uint8Array(values.buffer, values.byteOffset, values.byteLength));
    new Uint8Array(this.memory.buffer, address + values.byteLength, slackBytes).fill(0xff);
    return address;
  }

  view<T extends Typed>(type: TypedConstructor<T>, address: number, count: number): T {
    return new type(this.memory.buffer, address, count);
  }

  /** A copy of floats. */
  floats(address: number, count: number): Float32Array {
    return this.view(Float32Array, address, count).slice();
  }

  job(): Job {
    const address = this.take(RECORD_BYTES);
    const integers = this.view(Int32Array, address, RECORD_BYTES / 4);
    const numbers = this.view(Float32Array, address, RECORD_BYTES / 4);
    const job: Job = {
      address,
      integer: (field, value) => ((integers[field >> 2] = value), job),
      float: (field, value) => ((numbers[field >> 2] = value), job),
    };
    return job;
  }

  /** The address of the first block that something was written before or behind. */
  damage(): number | undefined {
    const bytes = new Uint8Array(this.memory.buffer);
    const untouched = (from: number, to: number): boolean => {
      for (let k = from; k < to; k++) if (bytes[k] !== guardByte) return false;
      return true;
    };
    return this.#blocks.find(
      ({ address, byteLength }) => !untouched(address - guardBytes, address) || !untouched(address + byteLength, address + byteLength + guardBytes),
    )?.address;
  }

  /** Gives all blocks back. */
  clear(): void {
    this.#blocks.length = 0;
    this.#end = 4096;
  }
}

/** A core on a bench of its own. */
export interface Core {
  name: string;
  bench: Bench;
  routines: Routines;
}

/** Links a binary with a bench. */
export async function coreOf(name: string, code: string): Promise<Core> {
  const bench = new Bench();
  const bytes = bytesOfHex(code);
  const { instance } = await WebAssembly.instantiate(bytes, { env: { memory: bench.memory } });
  return { name, bench, routines: instance.exports as unknown as Routines };
}

/** Both builds that are shipped. */
export const cores: readonly Core[] = [await coreOf("simd", simdCode), await coreOf("scalar", scalarCode)];
