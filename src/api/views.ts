import type { EngineMemory } from "../runtime/memory.js";
import type { ViewMemory } from "../runtime/viewMemory.js";
import type { ResultRaster, SampleType } from "../types.js";
import { whenUnclaimed } from "./claims.js";
import type { ImageShape } from "./validate/request.js";

/** One image in the engine's memory, reserved when it is first asked for. */
export class View {
  readonly #shape: ImageShape;
  readonly #memory: EngineMemory;
  readonly #blocks: ViewMemory;
  #address: number | undefined;
  #raster: ResultRaster | undefined;

  constructor(shape: ImageShape, memory: EngineMemory, blocks: ViewMemory) {
    this.#shape = shape;
    this.#memory = memory;
    this.#blocks = blocks;
  }

  get byteLength(): number {
    return this.#address === undefined ? 0 : this.#blocks.byteLengthAt(this.#address);
  }

  /**
   * The image: the same object, which nobody can change, until the memory has grown and its array is gone.
   *
   * @throws ConvolutionError `memory-limit`, `memory-exhausted`
   */
  get raster(): ResultRaster {
    const address = this.reserve();
    if (this.#raster === undefined || !this.#memory.isCurrent(this.#raster.data)) this.#raster = this.#rasterAt(address);
    return this.#raster;
  }

  #rasterAt(address: number): ResultRaster {
    const { width, height, channels, sample } = this.#shape;
    return Object.freeze({ data: this.#memory.imageAt(sample, address, width * height * channels), width, height, channels });
  }

  /**
   * Takes the memory at first, which may grow, and tells where.
   *
   * @throws ConvolutionError `memory-limit`, `memory-exhausted`
   */
  reserve(): number {
    const { width, height, channels, sample } = this.#shape;
    return (this.#address ??= this.#blocks.take(width * height * channels * bytesOf[sample]));
  }

  /** Gives the memory back, as soon as no unfinished job needs it. */
  dispose(): void {
    const address = this.#address;
    if (address === undefined) return;
    const stretch = { of: this.#memory, first: address, end: address + this.byteLength };
    this.#address = this.#raster = undefined;
    whenUnclaimed(stretch, () => this.#blocks.release(address));
  }
}

const bytesOf: Record<SampleType, number> = { u8: 1, u16: 2, f32: 4 };
