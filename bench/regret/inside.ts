/** Runs where things are timed: bundled with the library's sources as dist/ is, and loaded by Node and by a page alike. */
import { median } from "simple-statistics";
import { box, createEngine, type Engine, type HardwareProfile, type Kernel, type Method, type Raster } from "../../src/index.js";
import { measureProfile } from "../../src/measure/index.js";
import { planesOf } from "../inputs.js";
import { firstSights, type FirstSight } from "./firstSight.js";
import { timeOnce, type OnceTook } from "./once.js";
import { problemAt, type HeldOut } from "./problems.js";
import type { MethodTook } from "./statistics.js";
import { freshKernel } from "./taps.js";
import { firstEffort, rounded, secondEffort, timeMethods, type Bench } from "./timing.js";

/** What can be measured, by the index of a problem. */
export interface Inside {
  build: string;
  /** Prepared runs of the methods, in the order in which they are to be begun. */
  time(index: number, methods: readonly Method[], again: boolean): Promise<MethodTook[]>;
  /** Single calls, after `time`. */
  once(index: number, known: readonly MethodTook[]): OnceTook[];
  /** Milliseconds of `explain` with a kernel that it has seen. */
  explain(index: number): number;
  firstSights(kind: string): FirstSight[];
}

/** What is made for a problem, kept as long as it is asked for. */
interface Furnished {
  problem: HeldOut;
  kernel: Kernel;
  /** Made when it is first asked for. */
  image(): Raster;
}

const explains = 7;

function explainMilliseconds({ engine }: Bench, { problem: { layout, options }, kernel }: Furnished): number {
  const once = (): number => {
    const begun = performance.now();
    engine.explain(kernel, layout, options);
    return performance.now() - begun;
  };
  once();
  return rounded(median(Array.from({ length: explains }, once)));
}

/**
 * Makes the engine's memory as large as the largest problems need it, and writes to all of it: on some hosts the first touch of a page costs
 * more than a method takes to fill it.
 */
function touchMemory(engine: Engine): void {
  const filter = engine.prepare(box(1), { width: 4096, height: 4096, channels: 4, sample: "f32" }, { alpha: "none" });
  filter.source.data.fill(1);
  filter.dispose();
}

/** @param clock milliseconds: processor time where the host tells it, else the wall clock */
export async function open(clock: () => number = () => performance.now()): Promise<Inside> {
  const engine = await createEngine();
  touchMemory(engine);
  const bench = { engine, clock };
  let last: Furnished | undefined;
  const furnished = (index: number): Furnished => {
    if (last?.problem.index === index) return last;
    const problem = problemAt(index);
    let image: Raster | undefined;
    return (last = { problem, kernel: freshKernel(problem.taps), image: () => (image ??= planesOf(problem.layout, 1)[0]!) });
  };
  return {
    build: engine.build,
    async time(index, methods, again) {
      const { problem, kernel, image } = furnished(index);
      return timeMethods(bench, problem, kernel, image(), methods, again ? secondEffort : firstEffort);
    },
    once(index, known) {
      const { problem, image } = furnished(index);
      return timeOnce(bench, problem, image(), known);
    },
    explain: (index) => explainMilliseconds(bench, furnished(index)),
    firstSights: (kind) => firstSights((kernel, layout, options) => engine.explain(kernel, layout, options), kind),
  };
}

/** A profile as a page or a program measures it after loading: in an engine of its own, where nothing has run before. */
export async function freshProfile(): Promise<HardwareProfile> {
  const engine = await createEngine();
  const profile = await measureProfile(engine);
  engine.dispose();
  return profile;
}
