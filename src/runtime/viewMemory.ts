import type { Samples } from "../types.js";
import type { EngineMemory } from "./memory.js";

/** Routines read whole vectors: so many bytes behind a view are there to be read. */
const slackBytes = 64;

interface Block {
  address: number;
  byteLength: number;
}

/** Blocks that the caller may read and write: images in the engine's memory. */
export class ViewMemory {
  readonly #memory: EngineMemory;
  readonly #blocks: Block[] = [];

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
    this.#blocks.push({ address, byteLength: whole });
    return address;
  }

  /** Bytes that `take` took. */
  byteLengthAt(address: number): number {
    return this.#blocks.find((block) => block.address === address)!.byteLength;
  }

  release(address: number): void {
    const index = this.#blocks.findIndex((block) => block.address === address);
    this.#memory.release(address, this.#blocks[index]!.byteLength);
    this.#blocks.splice(index, 1);
  }

  /** False where samples lie in the memory, but in no block that is still taken. */
  isLive(samples: Samples): boolean {
    const first = this.#memory.addressOf(samples);
    if (first === undefined) return true;
    const end = first + samples.byteLength;
    // By number, as every frame asks: an iterator would be garbage.
    for (let k = 0; k < this.#blocks.length; k++) {
      const { address, byteLength } = this.#blocks[k]!;
      if (first >= address && end <= address + byteLength) return true;
    }
    return false;
  }
}
