import { fork, type ChildProcess } from "node:child_process";
import { once } from "node:events";
import { fileURLToPath } from "node:url";
import type { Engine, Filter, Raster } from "../../src/index.js";
import { inTurns, type Contender } from "../contender.js";
import { planesOf } from "../inputs.js";
import { spreadOf, type Spread } from "../spread.js";
import { verify } from "../verify.js";
import { threadCases, type ThreadCase } from "./threadCases.js";

const turns = 24;
/** Runs of this process in one turn while the other process works too. */
const runsBesides = 3;

export interface ThreadOutcome {
  case: string;
  /** One thread alone; one of two processes that do the same at the same time, this one and the other; two threads. Milliseconds of the clock. */
  alone: Spread;
  besides: Spread;
  companion: Spread;
  threads: Spread;
  /** Images in a second, over those of one thread alone. */
  processScaling: number;
  threadScaling: number;
  share: number;
  usedThreads: number;
}

/** A filter run against the clock. */
class Timed implements Contender {
  readonly name: string;
  readonly filter: Filter;
  readonly target;
  readonly planes: readonly Raster[];

  constructor(name: string, engine: Engine, one: (typeof threadCases)[ThreadCase], planes: readonly Raster[]) {
    this.name = name;
    this.planes = planes;
    this.filter = engine.prepare(one.kernel, one.layout, one.options);
    this.target = this.filter.run(planes[0]!);
  }

  run(plane: number): number {
    const begun = performance.now();
    this.filter.run(this.planes[plane % this.planes.length]!, this.target);
    return performance.now() - begun;
  }
}

/** The same while another process does the same. */
class Besides implements Contender {
  readonly name = "besides another process";
  readonly others: number[] = [];
  readonly #timed: Timed;
  readonly #companion: ChildProcess;

  constructor(timed: Timed, companion: ChildProcess) {
    this.#timed = timed;
    this.#companion = companion;
  }

  async run(plane: number): Promise<number> {
    this.#companion.send("work");
    await once(this.#companion, "message");
    const mine = Array.from({ length: runsBesides }, (_, run) => this.#timed.run(plane + run));
    this.#companion.send("rest");
    const [others] = (await once(this.#companion, "message")) as [number[]];
    this.others.push(...others);
    return spreadOf(mine).median;
  }
}

async function companionFor(name: ThreadCase): Promise<ChildProcess> {
  const companion = fork(fileURLToPath(new URL("companion.ts", import.meta.url)), [name], { execArgv: ["--import", "tsx"] });
  await once(companion, "message");
  return companion;
}

/** One thread, two processes and two threads in turns. Results of two threads are those of one, and what the definition says. */
export async function contest(name: ThreadCase, single: Engine, double: Engine): Promise<ThreadOutcome> {
  const one = threadCases[name];
  const planes = planesOf(one.layout);
  const alone = new Timed("one thread", single, one, planes);
  const threads = new Timed("two threads", double, one, planes);
  verify(one, planes[0]!, threads.target.data, threads.filter.explanation.errorBound);
  if (Buffer.compare(Buffer.from(alone.target.data.buffer), Buffer.from(threads.target.data.buffer)) !== 0) throw new Error(`${one.name}: other bytes`);
  const companion = await companionFor(name);
  const besides = new Besides(alone, companion);
  for (let run = 0; run < 10; run += 1) for (const contender of [alone, threads]) contender.run(run);
  const [a, b, t] = (await inTurns([alone, besides, threads], planes.length, turns)).map(spreadOf);
  companion.disconnect();
  const c = spreadOf(besides.others);
  const processScaling = a!.median / b!.median + a!.median / c.median;
  const threadScaling = a!.median / t!.median;
  const share = threadScaling / processScaling;
  const usedThreads = threads.filter.explanation.threads;
  for (const { filter } of [alone, threads]) filter.dispose();
  return { case: one.name, alone: a!, besides: b!, companion: c, threads: t!, processScaling, threadScaling, share, usedThreads };
}
