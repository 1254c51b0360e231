import { programsOf, sourceRows, waitingBytes } from "../planning/bands.js";
import type { Choice } from "../planning/choose.js";
import type { Problem } from "../planning/problem.js";
import { blockBytesOf, install, setUpAlone, type Installed } from "../runtime/execute.js";
import { Execution } from "../runtime/execution.js";
import type { Program } from "../runtime/program.js";
import type { Plane } from "../runtime/rowTraffic.js";
import type { Crew } from "../runtime/workers/crew.js";
import type { TeamPlan } from "../runtime/workers/furniture.js";
import type { ScatteredTeam } from "../runtime/workers/scatteredTeam.js";
import type { Team } from "../runtime/workers/team.js";
import type { Core } from "./loading.js";

/** A filter's plan at work on one image after the other, on one thread or several. */
export interface Runner {
  readonly done: boolean;
  readonly progress: number;
  /** True where there is nothing to do but wait for other threads. */
  readonly idle: boolean;
  begin(source: Plane, target: Plane): void;
  advance(): void;
  abandon(): void;
  /** All of a run, here and now. */
  run(source: Plane, target: Plane): void;
  /** Settles when other threads have moved on. */
  moved(): Promise<void>;
  /** Bytes of each of its blocks of memory. */
  readonly blockBytes: readonly number[];
  /** Takes other programs for the same blocks of memory, between two runs. */
  replace(blocks: Program[][]): void;
  dispose(): void;
}

/** One thread. */
class Alone implements Runner {
  readonly idle = false;
  readonly blockBytes: readonly number[];
  readonly #core: Core;
  readonly #installed: Installed;
  #execution: Execution;

  constructor({ plan, division }: Choice, core: Core) {
    const { memory, routines } = core;
    this.#core = core;
    this.#installed = install(programsOf(plan, division)[0]!, memory, routines);
    this.blockBytes = [this.#installed.byteLength];
    this.#execution = new Execution(this.#installed, memory, routines);
  }

  get done(): boolean {
    return this.#execution.done;
  }

  get progress(): number {
    return this.#execution.progress;
  }

  begin(source: Plane, target: Plane): void {
    this.#execution.begin(source, target);
  }

  advance(): void {
    this.#execution.advance();
  }

  abandon(): void {
    this.#execution.abandon();
  }

  run(source: Plane, target: Plane): void {
    this.#execution.begin(source, target);
    while (!this.#execution.done) this.#execution.advance();
  }

  async moved(): Promise<void> {}

  replace([programs]: Program[][]): void {
    const { memory, routines } = this.#core;
    const installed = { ...this.#installed, programs: programs! };
    setUpAlone(installed, memory, routines);
    this.#execution = new Execution(installed, memory, routines);
  }

  dispose(): void {
    this.#core.memory.release(this.#installed.address, this.#installed.byteLength);
  }
}

/** Several threads. */
class InTeam implements Runner {
  readonly #plan: TeamPlan;
  readonly #make: (plan: TeamPlan) => Team | ScatteredTeam;
  #team: Team | ScatteredTeam;

  constructor(plan: TeamPlan, make: (plan: TeamPlan) => Team | ScatteredTeam) {
    this.#plan = plan;
    this.#make = make;
    this.#team = make(plan);
  }

  get blockBytes(): readonly number[] {
    return this.#plan.blocks.map(blockBytesOf);
  }

  get done(): boolean {
    return this.#team.done;
  }

  get progress(): number {
    return this.#team.progress;
  }

  get idle(): boolean {
    return this.#team.idle;
  }

  begin(source: Plane, target: Plane): void {
    this.#team.begin(source, target);
  }

  advance(): void {
    this.#team.advance();
  }

  abandon(): void {
    this.#team.abandon();
  }

  run(source: Plane, target: Plane): void {
    this.#team.run(source, target);
  }

  moved(): Promise<void> {
    return this.#team.moved();
  }

  /** Another team takes the place, and finds the memory that the first one gives back. */
  replace(blocks: Program[][]): void {
    this.#team.dispose();
    this.#team = this.#make({ ...this.#plan, blocks });
  }

  dispose(): void {
    this.#team.dispose();
  }
}

function teamPlan({ plan, division }: Choice, problem: Problem): TeamPlan {
  const { request, horizontal, vertical, channels } = problem;
  return {
    threads: division.threads,
    blocks: programsOf(plan, division),
    together: division.together,
    rows: sourceRows(problem),
    source: { stride: request.width * channels, sample: request.sample },
    result: { stride: horizontal.count * channels, rows: vertical.count, sample: request.output.sample },
    waitingBytes: waitingBytes(problem),
    milliseconds: division.nanoseconds / 1e6,
  };
}

/**
 * Takes the memory of a plan and sets it up.
 *
 * @throws ConvolutionError `memory-limit`, `memory-exhausted`
 */
export function runnerOf(choice: Choice, problem: Problem, core: Core, crew: Crew | undefined): Runner {
  if (choice.division.threads === 1 || !crew) return new Alone(choice, core);
  return new InTeam(teamPlan(choice, problem), (plan) => crew.teamFor(plan, core.memory, core.routines));
}
