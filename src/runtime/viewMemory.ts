import type { Samples } from "../types.js";
import type { EngineMemory } from "./memory.js";

/** Routines read whole vectors: so many bytes behind a view are there to be read. */
const slackBytes = 64;

/** Blocks that the caller may read and write: images in the engine's memory. */
export class ViewMemory {
  readonly #memory: EngineMemory;
  /** Bytes of each block by its address. */
  readonly #blocks = new Map<number, number>();

  constructor(memory: EngineMemory) {
    this.#memory = memory;
  }

  /**
   * Takes a block for an image, cleared.
   *
   * @throws ConvolutionError `memory-limit`, `memory-exhausted`
   */
  take(byteLength: number): number {
    const whole = 64 * Math.ceil((byteLength + slackBytes) / 64);
    const address = this.#memory.take(whole);
    this.#blocks.set(address, whole);
    return address;
  }

  /** Bytes that `take` took. */
  byteLengthAt(address: number): number {
    return this.#blocks.get(address)!;
  }

  release(address: number): void {
    this.#memory.release(address, this.#blocks.get(address)!);
    this.#blocks.delete(address);
  }

  /** False where samples lie in the memory, but in no block that is still taken. */
  isLive(samples: Samples): boolean {
    const address = this.#memory.addressOf(samples);
    if (address === undefined) return true;
    for (const [first, byteLength] of this.#blocks) if (address >= first && address + samples.byteLength <= first + byteLength) return true;
    return false;
  }
}
