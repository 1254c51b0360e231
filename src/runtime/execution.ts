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
    this.#stepsDone = 0;
    this.#beginProgram(0);
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
    else if (step < -setup.length) this.#memory.writeTables(program.tables, this.#installed.address);
    else this.#call(program, setup[setup.length + step]!);
    this.#stepsDone++;
    if (this.done) this.abandon();
    else if (this.#step === steps.length) this.#beginProgram(this.#program + 1);
  }

  #call(program: Program, { routine, from, to, strip }: Step): void {
    this.#routines[routine](this.#installed.address + program.record, from, to, strip);
  }

  /** Rows in, the call, rows out. */
  #execute(program: Program, step: Step): void {
    const { address } = this.#installed;
    const traffic = this.#traffic[this.#program]!;
    if (step.read) traffic.stage(this.#source!, step.read, address + program.intake.offset);
    if (step.keep) traffic.stage(this.#source!, step.keep, address + program.intake.keepOffset);
    this.#call(program, step);
    if (step.write) traffic.takeOut(this.#target!, step.write, address + program.outlet.offset);
  }
}
