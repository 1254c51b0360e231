import type { Raster, Samples } from "../types.js";
import type { EngineMemory } from "./memory.js";
import type { Program, RowSpan } from "./program.js";

/** Samples and the distance of their rows: all that a run needs of a raster. */
export interface Plane extends Required<Pick<Raster, "data" | "stride">> {
  /** The raster's row that lies at the start, where it is not the first. */
  firstRow?: number;
}

/**
 * Brings rows of one program between arrays and the memory. The parts of an array that were copied once are remembered with it, so that the
 * same array again costs no object.
 */
export class RowTraffic {
  readonly #program: Program;
  readonly #memory: EngineMemory;
  readonly #partsOf = new WeakMap<Samples, Samples[]>();
  readonly #windows = new Map<number, Samples>();
  #parts: Samples[] = [];
  #next = 0;

  constructor(program: Program, memory: EngineMemory) {
    this.#program = program;
    this.#memory = memory;
  }

  /** Before the first rows of a run. */
  begin({ data }: Plane): void {
    this.#next = 0;
    const known = this.#partsOf.get(data);
    this.#parts = known ?? [];
    if (!known) this.#partsOf.set(data, this.#parts);
  }

  /** Samples first … first + count − 1 of an array, as they were last time or made anew. */
  #part(data: Samples, first: number, count: number): Samples {
    if (count === data.length) return data;
    const index = this.#next++;
    const known = this.#parts[index];
    if (known && known.length === count && known.byteOffset === data.byteOffset + first * data.BYTES_PER_ELEMENT) return known;
    return (this.#parts[index] = data.subarray(first, first + count));
  }

  /** Stages source rows: neighbours in one copy where they lie side by side in both places. */
  stage({ data, stride, firstRow = 0 }: Plane, rows: RowSpan, address: number): void {
    const { firstColumn, columns, channels, rowMap } = this.#program.intake;
    const rowSamples = columns * channels;
    if (rowSamples === 0) return;
    const rowBytes = rowSamples * data.BYTES_PER_ELEMENT;
    for (let k = 0; k < rows.count;) {
      const row = rowMap[rows.first + k]!;
      let run = 1;
      if (stride === rowSamples) while (k + run < rows.count && row >= 0 && rowMap[rows.first + k + run] === row + run) run++;
      if (row >= 0) this.#memory.stage(this.#part(data, (row - firstRow) * stride + firstColumn * channels, run * rowSamples), address + k * rowBytes);
      k += run;
    }
  }

  /** Takes result rows out. */
  takeOut(target: Plane, rows: RowSpan, address: number): void {
    const { data, stride } = target;
    const { firstRow, firstSample, rowSamples } = this.#program.outlet;
    const first = firstRow + rows.first;
    if (stride === rowSamples) return data.set(this.#window(data, rows.count, rows.count * rowSamples, address), first * stride);
    const rowBytes = rowSamples * data.BYTES_PER_ELEMENT;
    for (let k = 0; k < rows.count; k++) {
      data.set(this.#window(data, -1 - k, rowSamples, address + k * rowBytes), (first + k) * stride + firstSample);
    }
  }

  /** A stretch of the memory, the one of the same name again unless the memory has grown. */
  #window(like: Samples, name: number, count: number, address: number): Samples {
    const known = this.#windows.get(name);
    if (known && known.length === count && known.byteOffset === address) return known;
    const made = this.#memory.window(like, address, count);
    this.#windows.set(name, made);
    return made;
  }
}
