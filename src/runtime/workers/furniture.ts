import type { SampleType } from "../../types.js";
import { install, type Installed } from "../execute.js";
import type { EngineMemory } from "../memory.js";
import type { Program, RowSpan } from "../program.js";
import type { Routines } from "../routines.js";
import { TaskBoard } from "./board.js";
import type { Assignment, Place } from "./protocol.js";
import { BlockTasks, StepTasks, type Tasks } from "./tasks.js";

/** What a team works on: see planning/bands. */
export interface TeamPlan {
  threads: number;
  /** Programs that take turns in one block of memory; a block a band. */
  blocks: Program[][];
  /** Tasks are the steps of one program after the other; else a block each. */
  together: boolean;
  /** Rows of the source that are read, and samples from one to the next where they wait. */
  rows: RowSpan;
  source: { stride: number; sample: SampleType };
  result: { stride: number; rows: number; sample: SampleType };
  /** Room for both. */
  waitingBytes: { source: number; result: number };
  /** Predicted time of one run. */
  milliseconds: number;
}

const sampleBytes: Record<SampleType, number> = { u8: 1, u16: 2, f32: 4 };

/** Every block begins on a cache line. */
const lineBytes = 64;

/** What is written once, by the thread that installs a program, need not be sent with it. */
const withoutTables = (program: Program): Program => ({ ...program, tables: [], setup: [] });

/**
 * Everything of a team that other threads reach: blocks of programs, rows that wait, the board. Given up as a whole where one of them may
 * still write there.
 */
export class Furniture {
  readonly blocks: readonly Installed[];
  readonly board: TaskBoard;
  /** The calling thread's tasks: all blocks, or for each program that is worked on together its steps. */
  readonly tasks: readonly Tasks[];
  readonly #plan: TeamPlan;
  readonly #memory: EngineMemory;
  readonly #waiting: number;

  /** @throws ConvolutionError `memory-limit`, `memory-exhausted` */
  constructor(plan: TeamPlan, memory: EngineMemory, routines: Routines) {
    this.#plan = plan;
    this.#memory = memory;
    this.#waiting = memory.take(plan.waitingBytes.source + plan.waitingBytes.result);
    const blocks: Installed[] = [];
    this.blocks = blocks;
    try {
      for (const programs of plan.blocks) blocks.push(install(programs, memory, routines));
    } catch (error) {
      this.release();
      throw error;
    }
    this.board = TaskBoard.forLanes(plan.threads);
    const { programs, address } = blocks[0]!;
    this.tasks = plan.together ? programs.map((program) => new StepTasks(program, 0, address, memory, routines)) : [new BlockTasks(blocks, memory, routines)];
  }

  /** 64 where row 0 of the source, before the rows that wait, would seem to lie at address 0 for one of the programs: that means "staged" to the core. */
  get #shift(): number {
    const { rows, source, blocks } = this.#plan;
    const bytes = sampleBytes[source.sample];
    const startOf = ({ intake }: Program): number => this.#waiting + (intake.firstColumn * intake.channels - rows.first * source.stride) * bytes;
    return blocks.flat().some((program) => startOf(program) === 0) ? lineBytes : 0;
  }

  /** Where source rows wait for other threads, and where these leave results. */
  get source(): Place {
    const { rows, source } = this.#plan;
    return { address: this.#waiting + this.#shift, firstRow: rows.first, ...source, samples: rows.count * source.stride };
  }

  get result(): Place {
    const { result, waitingBytes } = this.#plan;
    return { address: this.#waiting + waitingBytes.source, firstRow: 0, stride: result.stride, sample: result.sample, samples: result.rows * result.stride };
  }

  assignment(id: number): Assignment {
    const { together } = this.#plan;
    const sent = (programs: readonly Program[]): Program[] => (together || programs.length === 1 ? programs.map(withoutTables) : [...programs]);
    return {
      id,
      blocks: this.blocks.map(({ programs, address }) => ({ programs: sent(programs), address })),
      source: this.source,
      result: this.result,
      board: this.board.words,
    };
  }

  release(): void {
    const { waitingBytes } = this.#plan;
    for (const { address, byteLength } of this.blocks) this.#memory.release(address, byteLength);
    this.#memory.release(this.#waiting, waitingBytes.source + waitingBytes.result);
  }
}
