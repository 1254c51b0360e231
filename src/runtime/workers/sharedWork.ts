import type { EngineMemory } from "../memory.js";
import type { Routines } from "../routines.js";
import type { Plane } from "../rowTraffic.js";
import { TaskBoard } from "./board.js";
import type { Assignment, Place, SharedJob } from "./protocol.js";
import { BlockTasks, StepTasks, type Tasks } from "./tasks.js";

/** How long it sleeps at a time while it waits for others, in milliseconds: then it looks whether the job is over. */
const napMilliseconds = 100;

/** Helps with jobs on a memory that the threads share: takes tasks from the board until there are none. */
export class SharedWork {
  readonly #memory: EngineMemory;
  readonly #routines: Routines;
  readonly #assignments = new Map<number, { assignment: Assignment; board: TaskBoard; tasks: Map<string, Tasks> }>();

  constructor(memory: EngineMemory, routines: Routines) {
    this.#memory = memory;
    this.#routines = routines;
  }

  keep(assignment: Assignment): void {
    this.#assignments.set(assignment.id, { assignment, board: new TaskBoard(assignment.board), tasks: new Map() });
  }

  drop(id: number): void {
    this.#assignments.delete(id);
  }

  help(job: SharedJob): void {
    const kept = this.#assignments.get(job.id);
    if (!kept) return;
    const { assignment, board } = kept;
    const given = job.source ?? assignment.source;
    const source = "address" in given ? this.#plane(given) : given;
    const target = this.#plane(assignment.result);
    const tasks = this.#tasksOf(kept, job);
    for (let task = board.take(job.job, job.tasks, job.lane); task >= 0; task = board.take(job.job, job.tasks, job.lane)) {
      if (this.#awaitTurn(board, tasks, task, job.job)) this.#do(board, tasks, task, job.job, source, target);
      board.finish(job.lane);
    }
  }

  #plane({ address, firstRow, stride, sample, samples }: Place): Plane {
    return { data: this.#memory.samplesAt(sample, address, samples), stride, firstRow };
  }

  /** Tasks of one lane, made once. */
  #tasksOf({ assignment, tasks }: { assignment: Assignment; tasks: Map<string, Tasks> }, { program, lane }: SharedJob): Tasks {
    const key = `${program ?? "blocks"} ${lane}`;
    const known = tasks.get(key);
    if (known) return known;
    const placed = assignment.blocks.map((block) => ({ ...block, byteLength: 0 }));
    const made =
      program === undefined
        ? new BlockTasks(placed, this.#memory, this.#routines)
        : new StepTasks(placed[0]!.programs[program]!, lane, placed[0]!.address, this.#memory, this.#routines);
    tasks.set(key, made);
    return made;
  }

  /** Waits for the source rows and the tasks that a task needs; false where the job ends before. */
  #awaitTurn(board: TaskBoard, tasks: Tasks, task: number, job: number): boolean {
    for (let rows = board.rows; rows < tasks.needed[task]!; rows = board.rows) {
      if (board.isOver(job)) return false;
      board.waitForRows(rows, napMilliseconds);
    }
    for (let done = board.done; done < tasks.after[task]!; done = board.done) {
      if (board.isOver(job)) return false;
      board.waitForTasks(done, napMilliseconds);
    }
    return true;
  }

  #do(board: TaskBoard, tasks: Tasks, task: number, job: number, source: Plane, target: Plane): void {
    tasks.begin(task, source, target);
    for (let ended = false; !ended && !board.isOver(job); board.beat()) ended = tasks.advance();
  }
}
