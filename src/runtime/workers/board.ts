/*
 * The words that all threads of a job see:
 *
 *     claim    the job's number in the upper half, the next task in the lower one; a task that nobody may take: closed
 *     done     tasks that are finished, by whomever
 *     rows     source rows that wait in shared memory, from the first on
 *     beats    steps that were done by other threads: while it moves, somebody lives
 *     lanes    for each thread the task that it is at, plus 1; 0 where it is at none
 */
const claimWord = 0;
const doneWord = 1;
const rowsWord = 2;
const beatsWord = 3;
const laneWords = 4;

const closed = 0xffff;
/** A job has at most this many tasks. */
export const mostTasks = closed - 1;

/**
 * Where threads that work on one job take their tasks. Tasks are taken in order and come in phases: a task may begin when all tasks of the
 * phases before are done. Whoever takes a task of a job that is over takes nothing, however late it comes.
 */
export class TaskBoard {
  readonly words: Int32Array<SharedArrayBuffer>;

  constructor(words: Int32Array<SharedArrayBuffer>) {
    this.words = words;
  }

  static forLanes(lanes: number): TaskBoard {
    return new TaskBoard(new Int32Array(new SharedArrayBuffer(4 * (laneWords + lanes))));
  }

  /** Opens job `job`, whose first `rows` source rows are there already. Requires that all tasks of the one before are done. */
  open(job: number, rows: number): void {
    Atomics.store(this.words, doneWord, 0);
    Atomics.store(this.words, rowsWord, rows);
    Atomics.store(this.words, claimWord, (job & 0xffff) << 16);
  }

  /** Lets nobody take a further task; tells how many were taken. */
  close(tasks: number): number {
    const word = Atomics.or(this.words, claimWord, closed);
    const next = word & 0xffff;
    return next === closed ? tasks : Math.min(next, tasks);
  }

  /** Takes the next task of job `job`, for `lane`; −1 where there is none. */
  take(job: number, tasks: number, lane: number): number {
    for (;;) {
      const word = Atomics.load(this.words, claimWord);
      const next = word & 0xffff;
      if (word >>> 16 !== (job & 0xffff) || next >= tasks) return -1;
      Atomics.store(this.words, laneWords + lane, next + 1);
      if (Atomics.compareExchange(this.words, claimWord, word, word + 1) === word) return next;
      Atomics.store(this.words, laneWords + lane, 0);
    }
  }

  /** True where the job was closed before its time. */
  isOver(job: number): boolean {
    const word = Atomics.load(this.words, claimWord);
    return word >>> 16 !== (job & 0xffff) || (word & 0xffff) === closed;
  }

  finish(lane: number): void {
    Atomics.store(this.words, laneWords + lane, 0);
    Atomics.add(this.words, doneWord, 1);
    Atomics.notify(this.words, doneWord);
  }

  get done(): number {
    return Atomics.load(this.words, doneWord);
  }

  beat(): void {
    Atomics.add(this.words, beatsWord, 1);
  }

  /** Steps that other threads did, ever: while it changes, they live. */
  get beats(): number {
    return Atomics.load(this.words, beatsWord);
  }

  isBusy(lane: number): boolean {
    return Atomics.load(this.words, laneWords + lane) !== 0;
  }

  addRows(rows: number): void {
    Atomics.store(this.words, rowsWord, rows);
    Atomics.notify(this.words, rowsWord);
  }

  get rows(): number {
    return Atomics.load(this.words, rowsWord);
  }

  /** Sleeps until more than `done` tasks are done, or rows than `rows` there, or the time is up. Only for threads that may wait. */
  waitForTasks(done: number, milliseconds: number): void {
    Atomics.wait(this.words, doneWord, done, milliseconds);
  }

  waitForRows(rows: number, milliseconds: number): void {
    Atomics.wait(this.words, rowsWord, rows, milliseconds);
  }

  /** The same as waitForTasks for threads that may not: settles no later than the time is up. */
  async tasksMoved(done: number, milliseconds: number): Promise<void> {
    const waiting = (Atomics as { waitAsync?: WaitAsync }).waitAsync?.(this.words, doneWord, done, milliseconds);
    if (waiting && !waiting.async) return;
    let timer: ReturnType<typeof setTimeout> | undefined;
    const timeUp = new Promise<void>((resolve) => (timer = setTimeout(resolve, waiting ? milliseconds : 1)));
    await (waiting ? Promise.race([waiting.value, timeUp]) : timeUp);
    clearTimeout(timer);
  }
}

type WaitAsync = (
  words: Int32Array,
  index: number,
  value: number,
  milliseconds: number,
) => { async: false; value: string } | { async: true; value: Promise<string> };

/** True where the calling thread may sleep: Node, and workers; a page's main thread may not. */
export function mayWait(): boolean {
  try {
    Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 1, 0);
    return true;
  } catch {
    return false;
  }
}
