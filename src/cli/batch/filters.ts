import { ConvolutionError, type Engine, type Filter, type Kernel, type Layout, type PrepareOptions } from "../../index.js";

/** Filters that stay prepared: folders hold images of few sizes, often two (upright and across) in turns. */
const mostFilters = 4;

/** One engine's filters for one kernel, prepared once for each layout that is met. */
export class Filters {
  readonly #prepare: (layout: Required<Layout>) => Filter;
  /** By layout; the one that was used last comes last. */
  readonly #prepared = new Map<string, Filter>();

  constructor(engine: Engine, kernel: Kernel, options: PrepareOptions) {
    this.#prepare = (layout) => engine.prepare(kernel, layout, options) as Filter;
  }

  /** The filter for a layout: it belongs to this object, which may dispose it at the next call. */
  for(layout: Required<Layout>): Filter {
    const { width, height, channels, sample } = layout;
    const key = `${width}×${height}×${channels} ${sample}`;
    const filter = this.#prepared.get(key) ?? this.#prepareInRoom(layout);
    this.#prepared.delete(key);
    this.#prepared.set(key, filter);
    if (this.#prepared.size > mostFilters) this.#forget(1);
    return filter;
  }

  /** Where memory is short, the other filters give theirs back. */
  #prepareInRoom(layout: Required<Layout>): Filter {
    try {
      return this.#prepare(layout);
    } catch (error) {
      const isShort = error instanceof ConvolutionError && error.fault === "capacity" && this.#prepared.size > 0;
      if (!isShort) throw error;
      this.#forget(this.#prepared.size);
      return this.#prepare(layout);
    }
  }

  #forget(count: number): void {
    for (const [key, filter] of [...this.#prepared].slice(0, count)) {
      filter.dispose();
      this.#prepared.delete(key);
    }
  }
}
