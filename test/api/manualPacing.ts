import type { Pacing } from "../../src/runtime/pacing.js";

/** A host whose clock and turns a test moves: each reading of the clock takes `stepMilliseconds`, and who yields waits for `turn`. */
export class ManualPacing implements Pacing {
  time = 0;
  readonly #stepMilliseconds: number;
  readonly #waiting: (() => void)[] = [];

  constructor(stepMilliseconds = 1) {
    this.#stepMilliseconds = stepMilliseconds;
  }

  now(): number {
    return (this.time += this.#stepMilliseconds);
  }

  yield(resume: () => void): void {
    this.#waiting.push(resume);
  }

  get idle(): boolean {
    return this.#waiting.length === 0;
  }

  /** One turn of everybody who yielded before. */
  turn(): void {
    for (const resume of this.#waiting.splice(0)) resume();
  }

  /** Turns until nobody yields any more; promises settle in between. */
  async finish(): Promise<void> {
    while (!this.idle) {
      this.turn();
      await Promise.resolve();
    }
  }
}
