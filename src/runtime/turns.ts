import type { Pacing } from "./pacing.js";

/** Work that goes step by step. */
export interface Stepwise {
  /** Does one step of a few milliseconds at most; true while there is more to do. Never throws. */
  advance(): boolean;
  /** After the steps of one slice; true where the work wants another slice. Never throws. */
  rest(): boolean;
}

/** A page that is kept from drawing or answering for longer than this feels it. */
const sliceMilliseconds = 8;

/**
 * Slices of work on one thread, in turns: one slice of each in the order in which they came, and between two slices the host has its turn.
 * Holds on to nothing while there is no work.
 */
export class Turns {
  readonly #pacing: Pacing;
  /** In the order of their turns. */
  readonly #waiting = new Set<Stepwise>();
  #yielding = false;

  constructor(pacing: Pacing) {
    this.#pacing = pacing;
  }

  /** Adds work to the end of the queue, unless it is in it. */
  add(work: Stepwise): void {
    this.#waiting.add(work);
    this.#yield();
  }

  #yield(): void {
    if (this.#yielding || this.#waiting.size === 0) return;
    this.#yielding = true;
    this.#pacing.yield(() => {
      this.#yielding = false;
      for (const work of this.#waiting) return this.#turn(work);
    });
  }

  #turn(work: Stepwise): void {
    this.#waiting.delete(work);
    this.#slice(work);
    if (work.rest()) this.#waiting.add(work);
    this.#yield();
  }

  /** As many steps as fit, judged by the longest so far; at least one. */
  #slice(work: Stepwise): void {
    const start = this.#pacing.now();
    let before = start;
    let longest = 0;
    while (work.advance()) {
      const now = this.#pacing.now();
      longest = Math.max(longest, now - before);
      before = now;
      if (now - start + longest > sliceMilliseconds) return;
    }
  }
}
