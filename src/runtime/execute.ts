import type { Raster } from "../types.js";
import type { EngineMemory } from "./memory.js";
import type { Intake, Outlet, Program, RowSpan, Step } from "./program.js";
import type { Routines } from "./routines.js";

type Plane = Required<Pick<Raster, "data" | "stride">>;

/** Programs that have their memory: one, or several that take turns in it. */
export interface Installed {
  programs: readonly Program[];
  address: number;
  byteLength: number;
}

/** Takes memory for programs; a single one is set up here and now. */
export function install(programs: readonly Program[], memory: EngineMemory, routines: Routines): Installed {
  const byteLength = programs.reduce((most, program) => Math.max(most, program.byteLength), 0);
  const address = memory.take(byteLength);
  if (programs.length === 1) setUp(programs[0]!, address, memory, routines);
  return { programs, address, byteLength };
}

/** Writes a program's tables and makes its set-up calls. */
function setUp(program: Program, address: number, memory: EngineMemory, routines: Routines): void {
  memory.writeTables(program.tables, address);
  for (const step of program.setup) routines[step.routine](address + program.record, step.from, step.to, step.strip);
}

/** Stages source rows for a step: neighbours in one copy where they lie side by side in both places. */
function stageRows(memory: EngineMemory, intake: Intake, source: Plane, rows: RowSpan, address: number): void {
  const { data, stride } = source;
  const rowSamples = intake.columns * intake.channels;
  if (rowSamples === 0) return;
  const rowBytes = rowSamples * data.BYTES_PER_ELEMENT;
  const left = intake.firstColumn * intake.channels;
  for (let k = 0; k < rows.count;) {
    const row = intake.rowMap[rows.first + k]!;
    let run = 1;
    if (stride === rowSamples) while (k + run < rows.count && row >= 0 && intake.rowMap[rows.first + k + run] === row + run) run++;
    if (row >= 0) memory.stage(data, row * stride + left, run * rowSamples, address + k * rowBytes);
    k += run;
  }
}

function takeRows(memory: EngineMemory, target: Plane, { firstSample, rowSamples }: Outlet, rows: RowSpan, address: number): void {
  const { data, stride } = target;
  if (stride === rowSamples) return memory.takeOut(data, rows.first * stride, rows.count * rowSamples, address);
  const rowBytes = rowSamples * data.BYTES_PER_ELEMENT;
  for (let k = 0; k < rows.count; k++) memory.takeOut(data, (rows.first + k) * stride + firstSample, rowSamples, address + k * rowBytes);
}

/** One step: rows in, the call, rows out. */
function executeStep(program: Program, address: number, step: Step, memory: EngineMemory, routines: Routines, source: Plane, target: Plane): void {
  const { intake, outlet } = program;
  if (step.read) stageRows(memory, intake, source, step.read, address + intake.offset);
  if (step.keep) stageRows(memory, intake, source, step.keep, address + intake.keepOffset);
  routines[step.routine](address + program.record, step.from, step.to, step.strip);
  if (step.write) takeRows(memory, target, outlet, step.write, address + outlet.offset);
}

/** All steps of all programs, back to back. */
export function execute(installed: Installed, memory: EngineMemory, routines: Routines, source: Plane, target: Plane): void {
  const { programs, address } = installed;
  for (const program of programs) {
    if (programs.length > 1) setUp(program, address, memory, routines);
    for (const step of program.steps) executeStep(program, address, step, memory, routines, source, target);
  }
}
