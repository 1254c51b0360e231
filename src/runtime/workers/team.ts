import { setUp } from "../execute.js";
import { samplesChanged } from "../execution.js";
import type { EngineMemory } from "../memory.js";
import type { Routines } from "../routines.js";
import type { Plane } from "../rowTraffic.js";
import { mayWait } from "./board.js";
import { stageRows, takeRows } from "./carry.js";
import type { Crew, Foreman, Hand } from "./crew.js";
import { Furniture, type TeamPlan } from "./furniture.js";
import { napMilliseconds, patienceFor } from "./patience.js";
import type { SharedJob, ToWorker } from "./protocol.js";
import type { Tasks } from "./tasks.js";

/** Rows are copied to where other threads see them about this many bytes at a time. */
const bytesAtATime = 500_000;

/** Whoever is at a step of a run that was ended has this long to finish it. */
const clearMilliseconds = 100;

/** Source rows "all there". */
const everyRow = 0x7fffffff;

const isShared = ({ data }: Plane): boolean => typeof SharedArrayBuffer === "function" && data.buffer instanceof SharedArrayBuffer;

/**
 * A filter whose runs several threads share, over one memory. The calling thread copies rows that others need to where they see them,
 * works on tasks itself, and copies out what others did: these never write to the caller's arrays. Used like an Execution:
 *
 *     team.begin(source, target);
 *     while (!team.done) {
 *       team.advance();
 *       if (team.idle) await team.moved();
 *     }
 */
export class Team implements Foreman {
  readonly #plan: TeamPlan;
  readonly #crew: Crew;
  readonly #memory: EngineMemory;
  readonly #routines: Routines;
  readonly #id: number;
  readonly #patience: number;
  readonly #stepsInAll: number;
  #furniture: Furniture | undefined;
  #source: Plane | undefined;
  #target: Plane | undefined;
  #lengths = { source: 0, target: 0 };
  #hands: Hand[] = [];
  #lost = false;
  #job = 0;
  #round = 0;
  #tasks!: Tasks;
  /** Tasks that any thread may take; the one after them is the calling thread's own. */
  #open = 0;
  #next = 0;
  #current = -1;
  /** What the calling thread did itself. */
  #mine: boolean[] = [];
  #rows = { copied: 0, wanted: 0 };
  #steps = 0;
  #beats = 0;
  #alive = { beats: 0, at: 0 };
  #progress = 1;
  /** A run that was ended before its time: tasks that were taken, and who may be at them. */
  #left: { taken: number; hands: readonly Hand[] } | undefined;
  done = true;
  /** Nothing to do but wait for others. */
  idle = false;

  constructor(plan: TeamPlan, crew: Crew, memory: EngineMemory, routines: Routines) {
    this.#plan = plan;
    this.#crew = crew;
    this.#memory = memory;
    this.#routines = routines;
    this.#id = crew.nextId();
    this.#patience = patienceFor(plan.milliseconds);
    this.#stepsInAll = plan.blocks.flat().reduce((sum, { steps }) => sum + steps.length, 0);
    this.#furnish();
  }

  get assignments(): ToWorker[] {
    return this.#furniture ? [{ kind: "keep", assignment: this.#furniture.assignment(this.#id) }] : [];
  }

  /** Steps that are done as a part of all: never less than before, and exactly 1 at the end. */
  get progress(): number {
    const beats = this.#furniture ? this.#furniture.board.beats - this.#beats : 0;
    this.#progress = this.done ? 1 : Math.max(this.#progress, Math.min(0.999, (this.#steps + beats) / this.#stepsInAll));
    return this.#progress;
  }

  #furnish(): Furniture {
    this.#furniture ??= new Furniture(this.#plan, this.#memory, this.#routines);
    this.#crew.enlist(this.#id, this);
    return this.#furniture;
  }

  /** All of a run, here and now. A page's main thread may not wait for others: there it does all itself. */
  run(source: Plane, target: Plane): void {
    this.#begin(source, target, !mayWait());
    try {
      while (!this.done) {
        this.advance();
        if (this.idle) this.#wait();
      }
    } catch (error) {
      this.abandon();
      throw error;
    }
  }

  /** Starts with an image. */
  begin(source: Plane, target: Plane): void {
    this.#begin(source, target, false);
  }

  #begin(source: Plane, target: Plane, alone: boolean): void {
    this.#clear();
    const furniture = this.#furniture ?? this.#furnish();
    this.#source = source;
    this.#target = target;
    this.#lengths = { source: source.data.length, target: target.data.length };
    this.#hands = alone ? [] : this.#crew.ready.slice(0, this.#plan.threads - 1);
    this.#steps = this.#progress = 0;
    this.#beats = furniture.board.beats;
    this.done = this.#lost = this.idle = false;
    this.#beginRound(0);
  }

  /** A round is one program that all work on, or all blocks. */
  #beginRound(round: number): void {
    const { blocks, tasks } = this.#furniture!;
    const { programs, address } = blocks[0]!;
    this.#round = round;
    this.#tasks = tasks[round]!;
    if (this.#plan.together && programs.length > 1) setUp(programs[round]!, address, this.#memory, this.#routines);
    this.#mine = [];
    this.#next = 0;
    this.#current = -1;
    this.#open = this.#tasks.count;
    if (this.#hands.length > 0) this.#callHands();
  }

  /** Opens the round for other threads. Where tasks are blocks, the last one is kept, so that its rows need not be copied. */
  #callHands(): void {
    const { board } = this.#furniture!;
    const { together, rows } = this.#plan;
    if (!together) this.#open--;
    const seen = isShared(this.#source!);
    const wanted = this.#tasks.needed.slice(0, this.#open).reduce((most, needed) => Math.max(most, needed), 0) - rows.first;
    this.#rows = { copied: 0, wanted: seen || this.#round > 0 ? 0 : Math.max(0, wanted) };
    this.#job = (this.#job + 1) & 0xffff;
    board.open(this.#job, this.#rows.wanted === 0 ? everyRow : 0);
    this.#alive = { beats: board.beats, at: performance.now() };
    const call: Omit<SharedJob, "lane"> = { kind: "help", id: this.#id, job: this.#job, tasks: this.#open };
    if (together) call.program = this.#round;
    if (seen) call.source = this.#placeOf(this.#source!);
    this.#hands.forEach((hand, index) => hand.post({ ...call, lane: index + 1 }));
    if (!together) this.#start(this.#open);
  }

  /** A source that others see: an address in the memory, or an array that is shared. */
  #placeOf({ data, stride }: Plane): SharedJob["source"] & object {
    const address = this.#memory.addressOf(data);
    const { sample } = this.#plan.source;
    return address === undefined ? { data, stride } : { address, firstRow: 0, stride, sample, samples: data.length };
  }

  #start(task: number): void {
    this.#current = task;
    this.#mine[task] = true;
    this.#tasks.begin(task, this.#source!, this.#target!);
  }

  /** A little work: rows copied, a step, or results copied out. Requires that the run is not done. */
  advance(): void {
    this.idle = false;
    if (this.#rows.copied < this.#rows.wanted) this.#copyRows();
    else if (this.#current >= 0) this.#step();
    else this.#take();
  }

  /** Arrays of the caller may have been taken away between two calls. */
  #checkArrays(): void {
    if (this.#source!.data.length < this.#lengths.source) throw samplesChanged("image");
    if (this.#target!.data.length < this.#lengths.target) throw samplesChanged("target");
  }

  #copyRows(): void {
    this.#checkArrays();
    const { source, board } = this.#furniture!;
    const { copied, wanted } = this.#rows;
    const rowBytes = source.stride * this.#source!.data.BYTES_PER_ELEMENT;
    const end = Math.min(wanted, copied + Math.max(1, Math.floor(bytesAtATime / rowBytes)));
    stageRows(this.#memory, this.#source!, source, this.#plan.rows.first, copied, end);
    this.#rows.copied = end;
    board.addRows(end === wanted ? everyRow : this.#plan.rows.first + end);
  }

  #step(): void {
    const { board } = this.#furniture!;
    if (this.#hands.length > 0 && board.done < this.#tasks.after[this.#current]!) return this.#watch();
    this.#steps++;
    if (!this.#tasks.advance()) return;
    if (this.#hands.length > 0 && this.#current < this.#open) board.finish(0);
    this.#current = -1;
  }

  #take(): void {
    const { board } = this.#furniture!;
    if (this.#hands.length === 0) {
      if (this.#next < this.#open) this.#start(this.#next++);
      else this.#endRound();
      return;
    }
    const task = board.take(this.#job, this.#open, 0);
    if (task >= 0) this.#start(task);
    else if (board.done === this.#open) this.#endRound();
    else this.#watch();
  }

  /** Others are at work; whether they live is seen by their beats. */
  #watch(): void {
    const { board } = this.#furniture!;
    const now = performance.now();
    const beats = board.beats + board.done;
    if (beats !== this.#alive.beats) this.#alive = { beats, at: now };
    if (this.#lost || now - this.#alive.at > this.#patience) this.#doWithout();
    else this.idle = true;
  }

  /** Whoever is at a task now is given up, with all that it may still write to; the run starts anew without help. */
  #doWithout(): void {
    const furniture = this.#furniture!;
    const suspects = this.#hands.filter((_, index) => furniture.board.isBusy(index + 1));
    const taken = furniture.board.close(this.#open);
    this.#furniture = undefined;
    void this.#retire(furniture, taken, suspects);
    for (const hand of suspects) this.#crew.dismiss(hand);
    const { board } = this.#furnish();
    this.#beats = board.beats;
    this.#steps = 0;
    this.#hands = [];
    this.#rows = { copied: 0, wanted: 0 };
    this.#beginRound(0);
  }

  /** The memory comes back when nobody can write there any more: when all tasks that were taken are done, or those who took them have ended. */
  async #retire(furniture: Furniture, taken: number, hands: readonly Hand[]): Promise<void> {
    while (furniture.board.done < taken) {
      const busy = hands.filter((hand, index) => !hand.gone && furniture.board.isBusy(index + 1));
      if (busy.length === 0) await Promise.all(hands.filter(({ gone }) => gone).map(({ ended }) => ended));
      if (busy.length === 0) break;
      await furniture.board.tasksMoved(furniture.board.done, napMilliseconds);
    }
    furniture.release();
  }

  #endRound(): void {
    this.#checkArrays();
    if (this.#hands.length > 0) for (let task = 0; task < this.#open; task++) if (!this.#mine[task]) this.#takeOut(task);
    if (this.#round + 1 < this.#furniture!.tasks.length) return this.#beginRound(this.#round + 1);
    this.#rest();
  }

  #rest(): void {
    this.done = true;
    this.idle = false;
    this.#source = this.#target = undefined;
    this.#hands = [];
  }

  /** Copies the results of a task that another thread did to the target. */
  #takeOut(task: number): void {
    const { blocks, result } = this.#furniture!;
    const { together } = this.#plan;
    const programs = together ? [blocks[0]!.programs[this.#round]!] : blocks[task]!.programs;
    for (const { outlet, steps } of programs) {
      for (const { write } of together ? [steps[task]!] : steps) if (write) takeRows(this.#memory, result, outlet, write, this.#target!);
    }
  }

  /** Sleeps until others have moved on. */
  #wait(): void {
    const { board } = this.#furniture!;
    board.waitForTasks(board.done, napMilliseconds);
  }

  /** The same without sleeping. */
  moved(): Promise<void> {
    const { board } = this.#furniture!;
    return board.tasksMoved(board.done, napMilliseconds);
  }

  lost(hand: Hand): void {
    const lane = this.#hands.indexOf(hand) + 1;
    if (lane > 0 && this.#furniture?.board.isBusy(lane)) this.#lost = true;
  }

  /** Ends a run before its time. Others may be at a step still: see `settle`. */
  abandon(): void {
    if (this.done) return;
    const { board } = this.#furniture!;
    if (this.#hands.length > 0) {
      this.#left = { taken: board.close(this.#open), hands: this.#hands };
      if (this.#current >= 0 && this.#current < this.#open) board.finish(0);
    }
    this.#rest();
  }

  /** After a run that was ended before its time: waits a little until nobody is at it any more, else leaves the memory to those who are. */
  #clear(): void {
    const left = this.#left;
    const furniture = this.#furniture;
    if (!left || !furniture) return;
    this.#left = undefined;
    const until = performance.now() + clearMilliseconds;
    while (mayWait() && furniture.board.done < left.taken && performance.now() < until) furniture.board.waitForTasks(furniture.board.done, 10);
    if (furniture.board.done >= left.taken) return;
    this.#furniture = undefined;
    void this.#retire(furniture, left.taken, left.hands);
  }

  /** Gives the memory back and lets workers forget the filter. */
  dispose(): void {
    this.abandon();
    this.#clear();
    this.#furniture?.release();
    this.#furniture = undefined;
    this.#crew.release(this.#id);
  }
}
