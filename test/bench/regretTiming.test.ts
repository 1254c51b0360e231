import { describe, expect, test } from "vitest";
import type { Engine, Filter, Kernel, Method, Raster, RunOptions } from "../../src/index.js";
import { timeOnce } from "../../bench/regret/once.js";
import { problemAt } from "../../bench/regret/problems.js";
import { typical, wasStopped, type MethodTook } from "../../bench/regret/statistics.js";
import { freshKernel } from "../../bench/regret/taps.js";
import { firstEffort, timeMethods, type Bench } from "../../bench/regret/timing.js";

const problem = problemAt(0);
const kernel = freshKernel(problem.taps);
const image: Raster = { data: new Uint8Array(1), width: 1, height: 1 };

/** A clock that filters move on by what they are told to take, and an account of who ran. */
class ScriptedBench implements Bench {
  now = 0;
  readonly ran: string[] = [];
  readonly kernels = new Set<Kernel>();
  /** Prepared filters that were not disposed. */
  open = 0;
  readonly engine: Engine;

  /** @param milliseconds of a run of each method; by the number of the run, counted from 0, where it is not always the same */
  constructor(milliseconds: Record<string, number | ((run: number) => number)>) {
    const take = (method: string): number => {
      const time = milliseconds[method]!;
      return typeof time === "number" ? time : time(this.ran.filter((one) => one === method).length - 1);
    };
    const run = (method: string): Raster => {
      this.ran.push(method);
      this.now += take(method);
      return image;
    };
    const prepared = (method: string): Partial<Filter> => ({
      run: (() => run(method)) as Filter["run"],
      runAsync: (async (_image: Raster, { onProgress }: RunOptions) => {
        this.ran.push(method);
        const time = take(method);
        for (let slice = 1; slice <= 10; slice += 1) {
          this.now += time / 10;
          onProgress?.(slice / 10);
        }
        return image;
      }) as Filter["runAsync"],
      dispose: () => {
        this.open -= 1;
      },
    });
    this.engine = {
      prepare: (_kernel: Kernel, _layout: unknown, { method }: { method: string }) => {
        this.open += 1;
        return prepared(method);
      },
      convolve: (_image: Raster, one: Kernel, { method }: { method: string }) => {
        this.kernels.add(one);
        return run(method);
      },
    } as unknown as Engine;
  }

  clock = (): number => this.now;
}

const timeAll = (bench: Bench, methods: readonly Method[]) => timeMethods(bench, problem, kernel, image, methods, firstEffort);
const found = (all: readonly MethodTook[], wanted: Method): MethodTook => all.find(({ method }) => method === wanted)!;

describe("prepared filters in turns", () => {
  test("all within three times the best are timed to the end, each as often, in batches that last", async () => {
    const bench = new ScriptedBench({ direct: 0.1, fft: 0.25 });
    const all = await timeAll(bench, ["direct", "fft"]);
    expect(all.map(typical)).toEqual([expect.closeTo(0.1, 9), expect.closeTo(0.25, 9)]);
    for (const one of all) expect(one).toMatchObject({ milliseconds: { samples: firstEffort.turns[1] } });
    const runs = bench.ran.filter((method) => method === "direct").length;
    // Fifteen turns of ten runs, and warming.
    expect(runs).toBeGreaterThanOrEqual(150);
    expect(bench.open).toBe(0);
  });

  test("long runs get the fewest turns", async () => {
    const all = await timeAll(new ScriptedBench({ direct: 500, fft: 600 }), ["direct", "fft"]);
    for (const one of all) expect(one).toMatchObject({ milliseconds: { samples: firstEffort.turns[0] } });
  });

  test("one that is past three times the best is stopped in its midst, however long it would have run", async () => {
    const bench = new ScriptedBench({ separable: 100, direct: 1_000_000 });
    const all = await timeAll(bench, ["separable", "direct"]);
    expect(found(all, "direct")).toEqual({ method: "direct", atLeast: 300 });
    expect(bench.now).toBeLessThan(200_000);
    expect(bench.ran.filter((method) => method === "direct")).toHaveLength(1);
    expect(bench.open).toBe(0);
  });

  test("a little more than three times the best is stopped too, a little less is not", async () => {
    const all = await timeAll(new ScriptedBench({ separable: 100, direct: 301, fft: 299 }), ["separable", "direct", "fft"]);
    expect([wasStopped(found(all, "direct")), wasStopped(found(all, "fft"))]).toEqual([true, false]);
  });

  test("a slow first run, as while the host compiles, stops nobody", async () => {
    const hiccup = (run: number): number => (run < 1 ? 4000 : 0.2);
    const all = await timeAll(new ScriptedBench({ separable: 0.3, direct: hiccup }), ["separable", "direct"]);
    expect(typical(found(all, "direct"))).toBeCloseTo(0.2, 9);
    expect(wasStopped(found(all, "direct"))).toBe(false);
  });

  test("turns come in different orders", async () => {
    const bench = new ScriptedBench({ direct: 20, separable: 20, fft: 20 });
    await timeAll(bench, ["direct", "separable", "fft"]);
    const turns = Array.from({ length: 5 }, (_, turn) => bench.ran.slice(-15).slice(3 * turn, 3 * turn + 3));
    for (const turn of turns) expect(turn.toSorted()).toEqual(["direct", "fft", "separable"]);
    expect(new Set(turns.map(String)).size).toBeGreaterThan(1);
  });
});

describe("single calls", () => {
  const known = (method: Method, time: number): MethodTook => ({ method, milliseconds: { median: time, p25: time, p75: time, samples: 15 } });

  test("have a kernel of their own each, and the engine's own choice is among them", () => {
    const bench = new ScriptedBench({ auto: 0.6, direct: 0.5, fft: 1.2 });
    const all = timeOnce(bench, problem, image, [known("direct", 0.1), known("fft", 0.2)]);
    expect(all.map(({ method }) => method)).toEqual(["auto", "direct", "fft"]);
    expect(all.map(typical)).toEqual([expect.closeTo(0.6, 9), expect.closeTo(0.5, 9), expect.closeTo(1.2, 9)]);
    expect(bench.kernels.size).toBe(bench.ran.length);
  });

  test("a method whose mere run takes more than three times the best call has lost without one", () => {
    const bench = new ScriptedBench({ auto: 0.5, direct: 0.5, fft: 9 });
    const all = timeOnce(bench, problem, image, [known("direct", 0.1), known("fft", 8)]);
    expect(all.find(({ method }) => method === "fft")).toEqual({ method: "fft", atLeast: 8 });
    expect(bench.ran).not.toContain("fft");
  });

  test("the engine's own choice is timed to the end, however slow it is", () => {
    const all = timeOnce(new ScriptedBench({ auto: 8, direct: 0.5 }), problem, image, [known("direct", 0.1)]);
    expect(typical(all[0]!)).toBeCloseTo(8, 9);
    expect(wasStopped(all[0]!)).toBe(false);
  });
});
