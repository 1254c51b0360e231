import { ConvolutionError } from "../errors.js";
import { RESULT_ROWS, RESULT_ROW_STRIDE, SOURCE_ROWS, SOURCE_ROW_STRIDE } from "../generated/record.js";
import type { Installed } from "./execute.js";
import type { EngineMemory } from "./memory.js";
import type { Program, Step } from "./program.js";
import type { Routines } from "./routines.js";
import { RowTraffic, type Plane } from "./rowTraffic.js";

/**
 * Programs at work on one image, a step at a time: whoever runs them may do something else between two steps. A step lasts a few
 * milliseconds at most. Made once for a filter, begun anew for each image; nothing is allocated while the same arrays come.
 *
 *     execution.begin(source, target);
 *     while (!execution.done) execution.advance();
 */
export class Execution {
  readonly #installed: Installed;
  readonly #memory: EngineMemory;
  readonly #routines: Routines;
  readonly #traffic: RowTraffic[];
  /** Several programs set themselves up anew at each run: their tables are one step, each set-up call another. */
  readonly #sharing: boolean;
  readonly #stepsInAll: number;
  #source: Plane | undefined;
  #target: Plane | undefined;
  /** Samples that the arrays had at the start: fewer now, and they were detached or resized. */
  #sourceLength = 0;
  #targetLength = 0;
  /** Addresses of arrays that lie in the engine's memory, where rows are read and written in place; else nothing. */
  #sourceAddress: number | undefined;
  #targetAddress: number | undefined;
  #program = 0;
  #step = 0;
  #stepsDone: number;

  constructor(installed: Installed, memory: EngineMemory, routines: Routines) {
    const { programs } = installed;
    this.#installed = installed;
    this.#memory = memory;
    this.#routines = routines;
    this.#traffic = programs.map((program) => new RowTraffic(program, memory));
    this.#sharing = programs.length > 1;
    this.#stepsInAll = programs.reduce((sum, { setup, steps }) => sum + steps.length + (this.#sharing ? 1 + setup.length : 0), 0);
    this.#stepsDone = this.#stepsInAll;
  }

  /** True before the first image and after the last step of each. */
  get done(): boolean {
    return this.#stepsDone === this.#stepsInAll;
  }

  /** Steps that are done as a part of all: never less than before, and exactly 1 at the end. */
  get progress(): number {
    return this.#stepsDone / this.#stepsInAll;
  }

  /** Starts with an image, whatever became of the one before. */
  begin(source: Plane, target: Plane): void {
    this.#source = source;
    this.#target = target;
    this.#sourceLength = source.data.length;
    this.#targetLength = target.data.length;
    this.#sourceAddress = this.#memory.addressOf(source.data);
    this.#targetAddress = this.#memory.addressOf(target.data);
    this.#stepsDone = 0;
    this.#beginProgram(0);
    if (!this.#sharing) this.#placeRows(this.#installed.programs[0]!);
  }

  /** Lets go of the arrays of a run that ends before its time. */
  abandon(): void {
    this.#stepsDone = this.#stepsInAll;
    this.#source = this.#target = undefined;
  }

  #beginProgram(index: number): void {
    this.#program = index;
    this.#step = this.#sharing ? -1 - this.#installed.programs[index]!.setup.length : 0;
    this.#traffic[index]!.begin(this.#source!);
  }

  /** One step. Requires that the run is not done. */
  advance(): void {
    const program = this.#installed.programs[this.#program]!;
    const { setup, steps } = program;
    const step = this.#step++;
    if (step >= 0) this.#execute(program, steps[step]!);
    else if (step < -setup.length) this.#writeTables(program);
    else this.#call(program, setup[setup.length + step]!);
    this.#stepsDone++;
    if (this.done) this.abandon();
    else if (this.#step === steps.length) this.#beginProgram(this.#program + 1);
  }

  /** One step of the only program, out of turn: for threads that take steps from a list. Requires `begin`, and that what the step needs is done. */
  perform(step: number): void {
    const program = this.#installed.programs[0]!;
    this.#execute(program, program.steps[step]!);
  }

  #writeTables(program: Program): void {
    this.#memory.writeTables(program.tables, this.#installed.address);
    this.#placeRows(program);
  }

  /** Tells the core where it reads and writes in place; 0 where rows are staged. */
  #placeRows({ record, lanes, intake, outlet }: Program): void {
    const source = this.#source!;
    const target = this.#target!;
    const { BYTES_PER_ELEMENT: sourceBytes } = source.data;
    const { BYTES_PER_ELEMENT: targetBytes } = target.data;
    const sourceStart = (intake.firstColumn * intake.channels - (source.firstRow ?? 0) * source.stride) * sourceBytes;
    const sourceRows = this.#sourceAddress === undefined ? 0 : this.#sourceAddress + sourceStart;
    const targetRows = this.#targetAddress === undefined ? 0 : this.#targetAddress + (outlet.firstRow * target.stride + outlet.firstSample) * targetBytes;
    for (let lane = 0; lane < (lanes?.length ?? 1); lane++) {
      const job = this.#installed.address + (lanes?.[lane]!.record ?? record);
      this.#memory.storeInteger(job + SOURCE_ROWS, sourceRows);
      this.#memory.storeInteger(job + SOURCE_ROW_STRIDE, source.stride * sourceBytes);
      this.#memory.storeInteger(job + RESULT_ROWS, targetRows);
      this.#memory.storeInteger(job + RESULT_ROW_STRIDE, target.stride * targetBytes);
    }
  }

  /** Arrays in the memory lie where they lay; others may have been taken away between two steps. */
  #checkArrays(): void {
    if (this.#sourceAddress === undefined && this.#source!.data.length < this.#sourceLength) throw samplesChanged("image");
    if (this.#targetAddress === undefined && this.#target!.data.length < this.#targetLength) throw samplesChanged("target");
  }

  #call(program: Program, { routine, from, to, strip }: Step): void {
    this.#routines[routine](this.#installed.address + program.record, from, to, strip);
  }

  /** Rows in, the call, rows out. */
  #execute(program: Program, step: Step): void {
    const { address } = this.#installed;
    const traffic = this.#traffic[this.#program]!;
    this.#checkArrays();
    if (step.read && this.#sourceAddress === undefined) traffic.stage(this.#source!, step.read, address + program.intake.offset);
    if (step.keep && this.#sourceAddress === undefined) traffic.stage(this.#source!, step.keep, address + program.intake.keepOffset);
    this.#call(program, step);
    if (step.write && this.#targetAddress === undefined) traffic.takeOut(this.#target!, step.write, address + program.outlet.offset);
  }
}

/** For arrays that are no longer what they were when a run was asked for. */
export function samplesChanged(what: string): ConvolutionError {
  const message = `The array of the ${what} was detached or made shorter during the run, which ends here. Leave it alone until the run is over, or pass a copy.`;
  return new ConvolutionError("samples-changed", message, { expected: "the array as it was at the start", received: "a shorter array" });
}
