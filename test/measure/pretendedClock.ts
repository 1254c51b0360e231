import type { Clock } from "../../src/measure/clock.js";

/** A clock that only moves when it is told to, and a little when it is asked. Yielding takes no time. */
export class PretendedClock implements Clock {
  /** What the clock shows, in milliseconds, before it is coarsened. */
  time = 1000;
  /** What a look takes. */
  readonly lookMilliseconds: number;
  readonly #step: number;
  rests = 0;

  /** @param step the clock shows multiples of it; 0: all */
  constructor(step = 0, lookMilliseconds = step === 0 ? 0.0005 : step / 200) {
    this.#step = step;
    this.lookMilliseconds = lookMilliseconds;
  }

  now(): number {
    this.time += this.lookMilliseconds;
    return this.#step === 0 ? this.time : Math.floor(this.time / this.#step) * this.#step;
  }

  yield(resume: () => void): void {
    this.rests++;
    queueMicrotask(resume);
  }
}
