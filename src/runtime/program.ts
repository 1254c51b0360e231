import type { SampleType } from "../types.js";

/** Routines that a step may call, by the names of the core's exports. */
export type RoutineName =
  | "sweepDirect"
  | "sweepSeparable"
  | "sweepDirectBytes"
  | "sweepSeparableBytes"
  | "sweepByteSums"
  | "sweepIntegerSums"
  | "sweepRunningSum"
  | "enterConstants"
  | "decodeCurve"
  | "enterStrip"
  | "leaveStrip"
  | "forwardColumns"
  | "inverseColumns"
  | "filterRows"
  | "placeTaps"
  | "takeSpectrum";

/** Consecutive rows. */
export interface RowSpan {
  first: number;
  count: number;
}

/** One call into the core, of bounded duration. */
export interface Step {
  routine: RoutineName;
  /** Units from … to − 1 of the routine. */
  from: number;
  to: number;
  /** Fourth argument, for routines that work on one strip. */
  strip: number;
  /** Extended rows to stage before. */
  read?: RowSpan;
  /** Extended rows to stage before, for the alpha that is kept. */
  keep?: RowSpan;
  /** Result rows to take out after. */
  write?: RowSpan;
}

/** Bytes that stand in a filter's memory from the start. */
export interface Table {
  /** From the start of the filter's memory. */
  offset: number;
  data: Int32Array | Float32Array | Uint8Array | Uint16Array;
  /** Entries (of an Int32Array) that hold offsets and become addresses: all, or these. */
  addresses?: "all" | readonly number[];
}

/** Where source rows are staged, and which part of them. */
export interface Intake {
  offset: number;
  /** Where rows for kept alpha are staged; the same layout. */
  keepOffset: number;
  sample: SampleType;
  channels: number;
  /** First source column that is read, and columns. */
  firstColumn: number;
  columns: number;
  /** Source row of each extended row, −1 where the constant stands. */
  rowMap: Int32Array;
}

/** Where result rows are staged. */
export interface Outlet {
  offset: number;
  sample: SampleType;
  /** The target's row where row 0 goes, where in a row samples go, and how many there are. */
  firstRow: number;
  firstSample: number;
  rowSamples: number;
}

/** What one thread has to itself where several work on one program: its record, and where its rows are staged. */
export interface Lane {
  record: number;
  intake: number;
  keep: number;
  outlet: number;
}

/** A plan as data: what stands in memory, and the calls to make. Nothing here depends on where the memory lies. */
export interface Program {
  byteLength: number;
  /** Offset of the job record. */
  record: number;
  tables: Table[];
  setup: Step[];
  steps: Step[];
  intake: Intake;
  outlet: Outlet;
  /** Where several threads may work on it together: a lane for each. */
  lanes?: readonly Lane[];
  /** And the steps that begin a phase: those of one phase do not depend on each other, and need all of the phases before. */
  phases?: readonly number[];
}
