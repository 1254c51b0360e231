import type { Installed } from "../execute.js";
import { Execution } from "../execution.js";
import type { EngineMemory } from "../memory.js";
import type { Program, Step } from "../program.js";
import type { Routines } from "../routines.js";
import type { Plane } from "../rowTraffic.js";

/** The program as one of its lanes sees it: with the lane's own record and staging, and nothing to set up. */
function inLane(program: Program, lane: number): Program {
  const own = program.lanes?.[lane];
  if (!own) return program;
  const { byteLength, tables, steps, intake, outlet } = program;
  return {
    byteLength,
    record: own.record,
    tables,
    setup: [],
    steps,
    intake: { ...intake, offset: own.intake, keepOffset: own.keep },
    outlet: { ...outlet, offset: own.outlet },
  };
}

/** How many source rows must be there before a step: all up to the last one that it reads. */
function rowsNeeded({ intake: { rowMap } }: Program, { read, keep }: Step): number {
  let last = -1;
  for (const rows of [read, keep]) {
    if (rows) for (let k = rows.first; k < rows.first + rows.count; k++) last = Math.max(last, rowMap[k]!);
  }
  return last + 1;
}

/** What can be taken from a board, as one thread does it: task by task, each a step or more. */
export interface Tasks {
  readonly count: number;
  /** Source rows that must be there before a task. */
  readonly needed: readonly number[];
  /** Tasks that must be done before: all of the phases before its own. */
  readonly after: readonly number[];
  begin(task: number, source: Plane, target: Plane): void;
  /** One step of the task; true when it was the last. */
  advance(): boolean;
}

/** Blocks as tasks, all in one phase: a task is a block's programs from first to last. */
export class BlockTasks implements Tasks {
  readonly count: number;
  readonly needed: readonly number[];
  readonly after: readonly number[];
  readonly #executions: Execution[];
  #current!: Execution;

  constructor(blocks: readonly Installed[], memory: EngineMemory, routines: Routines) {
    this.#executions = blocks.map((installed) => new Execution(installed, memory, routines));
    this.count = blocks.length;
    this.needed = blocks.map(({ programs }) => Math.max(...programs.flatMap((program) => program.steps.map((step) => rowsNeeded(program, step)))));
    this.after = blocks.map(() => 0);
  }

  begin(task: number, source: Plane, target: Plane): void {
    this.#current = this.#executions[task]!;
    this.#current.begin(source, target);
  }

  advance(): boolean {
    this.#current.advance();
    return this.#current.done;
  }
}

/** Steps of one program as tasks, in its phases. */
export class StepTasks implements Tasks {
  readonly count: number;
  readonly needed: readonly number[];
  readonly after: readonly number[];
  readonly #execution: Execution;
  #step = 0;

  constructor(program: Program, lane: number, address: number, memory: EngineMemory, routines: Routines) {
    const { steps, phases = [], byteLength } = program;
    this.#execution = new Execution({ programs: [inLane(program, lane)], address, byteLength }, memory, routines);
    this.count = steps.length;
    this.needed = steps.map((step) => rowsNeeded(program, step));
    this.after = steps.map((_, index) => phases.findLast((start) => start <= index) ?? 0);
  }

  begin(task: number, source: Plane, target: Plane): void {
    this.#step = task;
    this.#execution.begin(source, target);
  }

  advance(): boolean {
    this.#execution.perform(this.#step);
    this.#execution.abandon();
    return true;
  }
}
