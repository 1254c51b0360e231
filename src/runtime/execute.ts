import type { Raster } from "../types.js";
import type { EngineMemory } from "./memory.js";
import type { Intake, Program, RowSpan, Step } from "./program.js";
import type { Routines } from "./routines.js";

/** A program that has its memory. */
export interface Installed {
  program: Program;
  address: number;
}

/** Takes memory for a program, writes its tables and makes its set-up calls. */
export function install(program: Program, memory: EngineMemory, routines: Routines): Installed {
  const address = memory.take(program.byteLength);
  memory.writeTables(program.tables, address);
  for (const step of program.setup) routines[step.routine](address + program.record, step.from, step.to, step.strip);
  return { program, address };
}

/** Stages source rows for a step: neighbours in one copy where they lie side by side in both places. */
function stageRows(memory: EngineMemory, intake: Intake, source: Required<Pick<Raster, "data" | "stride">>, rows: RowSpan, address: number): void {
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

function takeRows(memory: EngineMemory, target: Required<Pick<Raster, "data" | "stride">>, rowSamples: number, rows: RowSpan, address: number): void {
  const { data, stride } = target;
  if (stride === rowSamples) return memory.takeOut(data, rows.first * stride, rows.count * rowSamples, address);
  const rowBytes = rowSamples * data.BYTES_PER_ELEMENT;
  for (let k = 0; k < rows.count; k++) memory.takeOut(data, (rows.first + k) * stride, rowSamples, address + k * rowBytes);
}

type Plane = Required<Pick<Raster, "data" | "stride">>;

/** One step: rows in, the call, rows out. */
function executeStep({ program, address }: Installed, step: Step, memory: EngineMemory, routines: Routines, source: Plane, target: Plane): void {
  const { intake, outlet } = program;
  if (step.read) stageRows(memory, intake, source, step.read, address + intake.offset);
  if (step.keep) stageRows(memory, intake, source, step.keep, address + intake.keepOffset);
  routines[step.routine](address + program.record, step.from, step.to, step.strip);
  if (step.write) takeRows(memory, target, outlet.rowSamples, step.write, address + outlet.offset);
}

/** All steps, back to back. */
export function execute(installed: Installed, memory: EngineMemory, routines: Routines, source: Plane, target: Plane): void {
  for (const step of installed.program.steps) executeStep(installed, step, memory, routines, source, target);
}
