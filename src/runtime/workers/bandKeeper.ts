import { install, type Installed } from "../execute.js";
import { Execution } from "../execution.js";
import type { EngineMemory } from "../memory.js";
import type { Routines } from "../routines.js";
import type { SentBand, ToWorker } from "./protocol.js";

type KeptBand = Extract<ToWorker, { kind: "keepBand" }>;

/** Filters bands that are sent to it, in a memory of its own. */
export class BandKeeper {
  readonly #memory: EngineMemory;
  readonly #routines: Routines;
  readonly #bands = new Map<string, { kept: KeptBand; installed: Installed; execution: Execution }>();

  constructor(memory: EngineMemory, routines: Routines) {
    this.#memory = memory;
    this.#routines = routines;
  }

  keep(kept: KeptBand): void {
    const installed = install(kept.programs, this.#memory, this.#routines);
    this.#bands.set(`${kept.id} ${kept.band}`, { kept, installed, execution: new Execution(installed, this.#memory, this.#routines) });
  }

  drop(id: number): void {
    for (const [name, { kept, installed }] of this.#bands) {
      if (kept.id !== id) continue;
      this.#memory.release(installed.address, installed.byteLength);
      this.#bands.delete(name);
    }
  }

  filter({ id, band, source, result }: SentBand): void {
    const known = this.#bands.get(`${id} ${band}`);
    if (!known) return;
    const { kept, execution } = known;
    execution.begin({ data: source, stride: kept.stride, firstRow: kept.firstRow }, { data: result, stride: kept.resultStride });
    while (!execution.done) execution.advance();
  }
}
