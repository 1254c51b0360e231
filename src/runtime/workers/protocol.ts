import type { Samples, SampleType } from "../../types.js";
import type { Program } from "../program.js";

/** A plane in the memory of whoever reads it. */
export interface Place {
  address: number;
  /** The raster's row that lies there. */
  firstRow: number;
  stride: number;
  sample: SampleType;
  samples: number;
}

/** What a thread needs to know of a filter before it can help with it. Programs of one block take turns in it. */
export interface Assignment {
  id: number;
  blocks: { programs: Program[]; address: number }[];
  /** Where source rows wait, and results. */
  source: Place;
  result: Place;
  board: Int32Array<SharedArrayBuffer>;
}

/** A job on a shared memory: take tasks from the board until there are none. */
export interface SharedJob {
  kind: "help";
  id: number;
  job: number;
  lane: number;
  /** Which program's steps are the tasks; absent where blocks are. */
  program?: number;
  tasks: number;
  /** The source itself where its memory is shared, else its rows wait. */
  source?: { data: Samples; stride: number } | Place;
}

/** A band sent from memory to memory: rows in `source`, room for results in `result`; both come back. */
export interface SentBand {
  kind: "band";
  id: number;
  band: number;
  job: number;
  source: Samples;
  result: Samples;
}

export type ToWorker =
  | { kind: "start"; module: WebAssembly.Module; memory?: WebAssembly.Memory }
  | { kind: "keep"; assignment: Assignment }
  | { kind: "keepBand"; id: number; band: number; programs: Program[]; firstRow: number; stride: number; resultStride: number }
  | { kind: "drop"; id: number }
  | SharedJob
  | SentBand;

export type FromWorker = { kind: "ready" } | { kind: "failed"; reason: string } | SentBand;
