import { ConvolutionError } from "../errors.js";
import type { Stepwise, Turns } from "../runtime/turns.js";
import type { Raster } from "../types.js";
import { claim, unclaim, type Claim } from "./claims.js";
import type { Runner } from "./runner.js";
import type { CheckedRunOptions } from "./validate/runOptions.js";

/** What a filter is asked to do when its turn has come. */
export interface Order {
  claim: Claim;
  options: CheckedRunOptions;
  /** Begins the execution and tells where its results will be found. */
  begin(): () => Raster;
}

interface Job extends Order {
  /** Nothing until it has begun. */
  result: (() => Raster) | undefined;
  resolve(result: Raster): void;
  reject(reason: unknown): void;
  /** What its signal calls. */
  abort(): void;
}

/** The jobs of one filter, one after the other, in slices: what begins is the first of them. */
export class JobQueue implements Stepwise {
  readonly #runner: Runner;
  readonly #turns: Turns;
  readonly #jobs: Job[] = [];

  constructor(runner: Runner, turns: Turns) {
    this.#runner = runner;
    this.#turns = turns;
  }

  /** True from the first unfinished job to the last. */
  get busy(): boolean {
    return this.#jobs.length > 0;
  }

  /**
   * Puts a job at the end of the queue.
   *
   * @throws ConvolutionError `array-in-use`
   */
  add(order: Order): Promise<Raster> {
    const { signal } = order.options;
    claim(order.claim);
    return new Promise((resolve, reject) => {
      const job: Job = { ...order, result: undefined, resolve, reject, abort: () => this.#fail(job, signal!.reason) };
      signal?.addEventListener("abort", job.abort);
      this.#jobs.push(job);
      this.#turns.add(this);
    });
  }

  /** Rejects all jobs. */
  dispose(reason: ConvolutionError): void {
    while (this.busy) this.#fail(this.#jobs[0]!, reason);
  }

  advance(): boolean {
    const job = this.#jobs[0];
    if (!job) return false;
    try {
      if (job.result) this.#runner.advance();
      else job.result = job.begin();
    } catch (error) {
      this.#fail(job, error);
      return false;
    }
    return !this.#runner.done && !this.#runner.idle;
  }

  rest(): boolean {
    const job = this.#jobs[0];
    if (job?.result) this.#report(job, job.result);
    if (!this.busy || !this.#runner.idle || this.#runner.done) return this.busy;
    void this.#runner.moved().then(() => this.#turns.add(this));
    return false;
  }

  /** Tells the progress; the caller's function may throw, abort the job, or dispose the filter. */
  #report(job: Job, result: () => Raster): void {
    try {
      job.options.onProgress?.(this.#runner.progress);
    } catch (error) {
      return this.#fail(job, error);
    }
    if (this.#jobs[0] !== job || !this.#runner.done) return;
    this.#leave(job);
    job.resolve(result());
  }

  #fail(job: Job, reason: unknown): void {
    if (!this.#jobs.includes(job)) return;
    if (job.result) this.#runner.abandon();
    this.#leave(job);
    job.reject(reason);
  }

  #leave(job: Job): void {
    this.#jobs.splice(this.#jobs.indexOf(job), 1);
    job.options.signal?.removeEventListener("abort", job.abort);
    unclaim(job.claim);
  }
}
