import { Bench } from "tinybench";
import { processorMilliseconds } from "./processorTime.js";
import { spreadOf, type Spread } from "./spread.js";

/** Something that this process does again and again. */
export interface Loop {
  name: string;
  /** Does the work once; turns count up, so that each can take another input. */
  run(turn: number): void;
}

export interface LoopTime {
  name: string;
  milliseconds: Spread;
  /** True where a median is so close to the clock's step that its digits say little. */
  saturated: boolean;
}

/** Rounds of tinybench: every loop is met by the slow and the quick moments of the machine alike. */
const rounds = 3;
/** A median of fewer steps of the clock than this is worth a warning. */
const fewestSteps = 20;

/** What loops are timed with: processor time leaves out what other processes take meanwhile, wall-clock time shows finer steps. */
const clocks = { processor: processorMilliseconds, wall: () => performance.now() };
export type Clock = keyof typeof clocks;

/** The smallest step that a clock shows, in milliseconds. */
function stepOf(now: () => number): number {
  let smallest = Infinity;
  for (let look = 0; look < 500; look += 1) {
    const before = now();
    let after = now();
    while (after === before) after = now();
    smallest = Math.min(smallest, after - before);
  }
  return smallest;
}

/** Times loops with tinybench, round by round, and sums the rounds up. Warm-up is a part of every round. */
export async function timeLoops(loops: readonly Loop[], milliseconds: number, clock: Clock = "processor", fewestRuns = 7): Promise<LoopTime[]> {
  const timestampProvider = { name: `${clock} time`, fn: clocks[clock], fromMs: (value: number) => value, toMs: Number };
  const samples: number[][] = loops.map(() => []);
  const budget = { time: milliseconds / rounds, iterations: fewestRuns, warmupTime: Math.min(100, milliseconds / 6), warmupIterations: 2 };
  for (let round = 0; round < rounds; round += 1) {
    const bench = new Bench({ ...budget, timestampProvider, retainSamples: true });
    for (const { name, run } of loops) {
      let turn = 0;
      bench.add(name, () => run(turn++));
    }
    await bench.run();
    for (const [index, { name, result }] of bench.tasks.entries()) {
      if (result.state !== "completed") throw new Error(`${name} did not complete: ${result.state}`);
      for (const sample of result.latency.samples!) samples[index]!.push(sample);
    }
  }
  const step = stepOf(clocks[clock]);
  return loops.map(({ name }, index) => {
    const spread = spreadOf(samples[index]!);
    return { name, milliseconds: spread, saturated: spread.median < fewestSteps * step };
  });
}

/** Says which medians the clock is too coarse for. */
export function warnOfSaturation(times: readonly LoopTime[]): void {
  for (const { name, milliseconds, saturated } of times) {
    if (saturated) console.log(`warning: ${name} takes ${milliseconds.median} ms, only a few steps of the clock; its digits say little`);
  }
}
