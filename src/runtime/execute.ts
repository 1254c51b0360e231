import type { Execution } from "./execution.js";
import type { EngineMemory } from "./memory.js";
import type { Program } from "./program.js";
import type { Routines } from "./routines.js";
import type { Plane } from "./rowTraffic.js";

/** Programs that have their memory: one, or several that take turns in it. */
export interface Installed {
  programs: readonly Program[];
  address: number;
  byteLength: number;
}

/** Bytes that programs need which take turns in one block. */
export function blockBytesOf(programs: readonly Program[]): number {
  return programs.reduce((most, program) => Math.max(most, program.byteLength), 0);
}

/** Takes memory for programs; a single one is set up here and now. */
export function install(programs: readonly Program[], memory: EngineMemory, routines: Routines): Installed {
  const byteLength = blockBytesOf(programs);
  const address = memory.take(byteLength);
  const installed = { programs, address, byteLength };
  setUpAlone(installed, memory, routines);
  return installed;
}

/** Sets a single program up; several do it themselves at each run. */
export function setUpAlone({ programs, address }: Installed, memory: EngineMemory, routines: Routines): void {
  if (programs.length === 1) setUp(programs[0]!, address, memory, routines);
}

/** Writes a program's tables and makes its set-up calls. */
export function setUp(program: Program, address: number, memory: EngineMemory, routines: Routines): void {
  memory.writeTables(program.tables, address);
  for (const step of program.setup) routines[step.routine](address + program.record, step.from, step.to, step.strip);
}

/** All steps of all programs, back to back. */
export function execute(execution: Execution, source: Plane, target: Plane): void {
  execution.begin(source, target);
  while (!execution.done) execution.advance();
}
