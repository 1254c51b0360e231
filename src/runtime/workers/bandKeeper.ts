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
  readonly #bands = new Map<number, { kept: KeptBand; installed: Installed; execution: Execution }>();

  constructor(memory: EngineMemory, routines: Routines) {
    this.#memory = memory;
    this.#routines = routines;
  }

  keep(kept: KeptBand): void {
    this.drop(kept.id);
    const installed = install(kept.programs, this.#memory, this.#routines);
    this.#bands.set(kept.id, { kept, installed, execution: new Execution(installed, this.#memory, this.#routines) });
  }

  drop(id: number): void {
    const band = this.#bands.get(id);
    if (band) this.#memory.release(band.installed.address, band.installed.byteLength);
    this.#bands.delete(id);
  }

  filter({ id, source, result }: SentBand): void {
    const { kept, execution } = this.#bands.get(id)!;
    execution.begin({ data: source, stride: kept.stride }, { data: result, stride: kept.resultStride });
    while (!execution.done) execution.advance();
  }
}
