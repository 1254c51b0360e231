import type { RoutineName } from "./program.js";

/** One routine of the core: units from … to − 1 of a job, and the strip for those that work on one. */
export type Routine = (job: number, from: number, to: number, strip: number) => void;

export type Routines = Record<RoutineName, Routine> & { vectorFloats(): number; fused(): number };

const names: readonly RoutineName[] = [
  "sweepDirect",
  "sweepSeparable",
  "sweepDirectBytes",
  "sweepSeparableBytes",
  "sweepByteSums",
  "sweepIntegerSums",
  "sweepRunningSum",
  "enterConstants",
  "decodeCurve",
  "enterStrip",
  "leaveStrip",
  "forwardColumns",
  "inverseColumns",
  "filterRows",
  "placeTaps",
  "takeSpectrum",
];

/** Links a compiled core with a memory. Nothing where the module is not a core of this package: the missing export's name. */
export async function link(module: WebAssembly.Module, memory: WebAssembly.Memory): Promise<Routines | { missing: string }> {
  const imported = WebAssembly.Module.imports(module).find(({ module: from, name }) => from !== "env" || name !== "memory");
  if (imported) return { missing: `it imports ${imported.module}.${imported.name}` };
  const exported = new Set(WebAssembly.Module.exports(module).map(({ name }) => name));
  const missing = [...names, "vectorFloats", "fused"].find((name) => !exported.has(name));
  if (missing) return { missing: `it does not export ${missing}` };
  const instance = await WebAssembly.instantiate(module, { env: { memory } });
  return instance.exports as unknown as Routines;
}
