import { RECORD_BYTES } from "../generated/record.js";
import type { Table } from "../runtime/program.js";

/** Writes the fields of a job record; see the core's record for what they mean. */
export class JobRecord {
  readonly #bytes = new ArrayBuffer(RECORD_BYTES);
  readonly #integers = new Int32Array(this.#bytes);
  readonly #floats = new Float32Array(this.#bytes);
  readonly #addresses: number[] = [];

  integer(field: number, value: number): this {
    this.#integers[field >> 2] = value;
    return this;
  }

  float(field: number, value: number): this {
    this.#floats[field >> 2] = value;
    return this;
  }

  /** An offset that becomes an address when the filter gets its memory. */
  pointer(field: number, offset: number): this {
    this.#addresses.push(field >> 2);
    return this.integer(field, offset);
  }

  table(offset: number): Table {
    return { offset, data: this.#integers, addresses: this.#addresses };
  }
}
