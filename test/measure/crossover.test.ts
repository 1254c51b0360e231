import { describe, expect, test } from "vitest";
import { crossoverBy } from "../../src/measure/crossover.js";
import type { Crossing, Crossover, MeasureCrossoverOptions } from "../../src/measure/types.js";
import type { Method } from "../../src/types.js";
import { chance } from "./chance.js";
import { PretendedClock } from "./pretendedClock.js";
import { PretendedEngine, type CostSurface, type Pretence } from "./pretendedEngine.js";

const layout = { width: 64, height: 48 };
const milliseconds = 5000;

interface Setting extends Partial<Omit<Pretence, "clock" | "dice">> {
  truth: CostSurface;
  seed?: number;
  /** Of the clock. */
  step?: number;
}

function pretend({ seed = 1, step = 0, noise = 0.03, ...rest }: Setting) {
  const clock = new PretendedClock(step);
  const pretended = new PretendedEngine({ clock, dice: chance(seed), noise, ...rest });
  const measure = (options: Partial<MeasureCrossoverOptions> = {}): Promise<Crossover> =>
    crossoverBy(clock, pretended.engine, { ...layout, milliseconds, ...options });
  return { clock, pretended, measure };
}

/** Where two rising lines meet: by halving. */
function trueCrossing(truth: CostSurface, from: Method, to: Method): number {
  let [low, high] = [1, 1023];
  while (high - low > 1e-9) {
    const middle = (low + high) / 2;
    if (truth[from]!(middle) < truth[to]!(middle)) low = middle;
    else high = middle;
  }
  return low;
}

const quadratic: CostSurface = { direct: (n) => 0.02 * n * n, separable: (n) => 0.12 * n + 0.3, fft: () => 3 };
const surfaces: Record<string, CostSurface> = {
  "direct a·n², separable b·n, FFT c": quadratic,
  "direct a·n², FFT c·log n": { direct: (n) => 0.004 * n * n, fft: (n) => 0.9 + 0.1 * Math.log2(n + 64) },
  "lines that meet at a small angle": { separable: (n) => 0.05 * n + 0.2, fft: (n) => 1.6 + 0.02 * n },
};

const repetitions = typeof document === "undefined" ? 20 : 4;
const leastCoverage = 0.95;

describe.each(Object.entries(surfaces))("%s", (_, truth) => {
  test("of all crossings found in repetitions with 1…20 % of noise, 95 % or more hold the true one in their interval", async () => {
    let [found, covered] = [0, 0];
    const missed: string[] = [];
    for (const noise of [0.01, 0.05, 0.2]) {
      for (const step of [0, 1]) {
        for (let seed = 1; seed <= repetitions; seed++) {
          // One millisecond in fifty is disturbed.
          const { measure } = pretend({ truth, noise, step, seed, disturbed: 0.02 });
          const { crossings } = await measure({ milliseconds: step === 0 ? milliseconds : 4 * milliseconds });
          expect(crossings.length).toBeGreaterThanOrEqual(noise < 0.2 ? 1 : 0);
          for (const { from, to, interval } of crossings) {
            const size = trueCrossing(truth, from, to);
            const holds = interval[0] <= size && size <= interval[1];
            found++;
            if (holds) covered++;
            else missed.push(`noise ${noise}, step ${step}, seed ${seed}: ${from} to ${to} at ${size}, not in ${interval.join("…")}`);
          }
        }
      }
    }
    expect(covered / found, missed.join("\n")).toBeGreaterThanOrEqual(leastCoverage);
  });

  test("without noise every crossing that there is in the range is found, in an interval of neighbouring sizes", async () => {
    const { crossings, rows } = await pretend({ truth, noise: 0 }).measure();
    const sizes = rows.map(({ size }) => size);
    const pairs = crossings.map(({ from, to }) => `${from} ${to}`);
    const methods = Object.keys(truth) as Method[];
    for (const from of methods) {
      for (const to of methods) {
        const ahead = (size: number): boolean => truth[from]!(size) < truth[to]!(size);
        if (from !== to && ahead(sizes[0]!) && !ahead(sizes.at(-1)!)) expect(pairs).toContain(`${from} ${to}`);
      }
    }
    for (const { from, to, size, interval } of crossings) {
      const exact = trueCrossing(truth, from, to);
      expect(interval[0] <= exact && exact <= interval[1]).toBe(true);
      expect(sizes.indexOf(interval[1]) - sizes.indexOf(interval[0])).toBe(1);
      expect(size).toBeGreaterThanOrEqual(interval[0]);
      expect(size).toBeLessThanOrEqual(interval[1]);
    }
  });
});

test("a crossing leads where its two methods are the fastest of all, and no other does", async () => {
  const { crossings } = await pretend({ truth: quadratic }).measure();
  const leading = (one: Pick<Crossing, "from" | "to">): boolean => crossings.find(({ from, to }) => from === one.from && to === one.to)!.leading;
  expect(leading({ from: "direct", to: "separable" })).toBe(true);
  expect(leading({ from: "separable", to: "fft" })).toBe(true);
  expect(leading({ from: "direct", to: "fft" })).toBe(false);
});

describe("none in the range", () => {
  test("one method ahead throughout: the notes say which, and there is no crossing", async () => {
    const { crossings, notes } = await pretend({ truth: { direct: (n) => 0.05 * n, fft: (n) => 0.1 * n + 1 } }).measure();
    expect(crossings).toEqual([]);
    expect(notes.join(" ")).toMatch(/No method overtakes another between 3×3 and 127×127 taps: direct/);
  });

  test("two that take the same time: nothing is claimed", async () => {
    for (let seed = 1; seed <= 10; seed++) {
      const same = (n: number): number => 0.5 + 0.01 * n;
      const { crossings, notes } = await pretend({ truth: { direct: same, fft: same }, noise: 0.1, seed }).measure();
      for (const { interval } of crossings) expect(interval[1] / interval[0]).toBeGreaterThan(1.5);
      if (crossings.length === 0) expect(notes.join(" ")).toMatch(/nearer than the noise|No method overtakes/);
    }
  });

  test("a single method that applies has no crossing", async () => {
    const { crossings, rows, notes } = await pretend({ truth: { direct: (n) => 0.01 * n } }).measure();
    expect(crossings).toEqual([]);
    expect(rows.every(({ fastest, regret }) => fastest === "direct" && regret === 0)).toBe(true);
    expect(notes.length).toBeGreaterThan(0);
  });

  test("one size alone", async () => {
    const { crossings, rows } = await pretend({ truth: quadratic }).measure({ sizes: [9] });
    expect(rows.map(({ size }) => size)).toEqual([9]);
    expect(crossings).toEqual([]);
  });
});

test("steps that cross more than once lie in the interval: from where the second was first ahead to where the first last was", async () => {
  const truth: CostSurface = { separable: (n) => 0.05 * n + 0.2, fft: (n) => 0.8 + 0.9 * Math.floor(n / 20) };
  for (let seed = 1; seed <= repetitions; seed++) {
    const { rows, crossings } = await pretend({ truth, seed }).measure({ sizes: Array.from({ length: 40 }, (_, k) => 3 + 2 * k) });
    const crossing = crossings.find(({ from }) => from === "separable");
    const clearly = (first: Method, second: Method): number[] =>
      rows.filter(({ size, samples }) => samples >= 9 && truth[first]!(size) < 0.85 * truth[second]!(size)).map(({ size }) => size);
    const [ahead, behind] = [clearly("fft", "separable"), clearly("separable", "fft")];
    expect(Math.max(...behind)).toBeGreaterThan(Math.min(...ahead));
    if (!crossing) continue;
    expect(crossing.interval[0]).toBeLessThan(Math.min(...ahead));
    expect(crossing.interval[1]).toBeGreaterThan(Math.max(...behind));
  }
});

test("one disturbed run, whichever it is, strikes no method out and makes no crossing", async () => {
  const truth: CostSurface = { direct: (n) => 1 + 0.1 * n, fft: (n) => 1.3 + 0.13 * n };
  for (let disturbedRun = 1; disturbedRun <= 120; disturbedRun++) {
    const { rows, crossings } = await pretend({ truth, noise: 0.01, disturbedRun, seed: disturbedRun }).measure({ sizes: [3, 5, 7, 9, 11] });
    for (const { milliseconds: times } of rows) expect(times.direct! / times.fft!).toBeCloseTo(1 / 1.3, 1);
    expect(crossings).toEqual([]);
  }
});

describe("time", () => {
  test.each([0, 1])("is kept to by a clock with a step of %f ms: no look is begun that would not end in time", async (step) => {
    for (const asked of [50, 300, 1000, 4000]) {
      const { measure, clock } = pretend({ truth: quadratic, step });
      const begun = clock.time;
      await measure({ milliseconds: asked });
      // A look's estimate is exact but for noise and the wait for the clock to move; finding the step takes 30 ms at most.
      expect(clock.time - begun).toBeLessThanOrEqual(1.1 * asked + 40);
    }
  });

  test.each([8, 1e6])("is exceeded by one look at most where everything takes %f times as long as predicted", async (factor) => {
    const predicted = Object.fromEntries(Object.entries(quadratic).map(([name, cost]) => [name, (n: number) => cost(n) / factor]));
    const { measure, clock } = pretend({ truth: quadratic, predicted });
    const begun = clock.time;
    const { rows } = await measure({ milliseconds: 2000 });
    const longest = Math.max(...rows.map(({ milliseconds: times }) => Object.values(times).reduce((sum, one) => sum + one, 0)));
    expect(clock.time - begun).toBeLessThanOrEqual(2000 + 8 * longest);
  });

  test("that suffices for the small sizes only is spent on them, and the notes name the others", async () => {
    const { rows, notes } = await pretend({ truth: { direct: (n) => 0.5 * n * n } }).measure({ milliseconds: 1500 });
    expect(rows.length).toBeGreaterThan(0);
    expect(Math.max(...rows.map(({ size }) => size))).toBeLessThan(127);
    expect(notes.join(" ")).toMatch(/want of time or memory: .*127×127/);
  });

  test("that suffices for nothing gives no rows, and says why", async () => {
    const { rows, crossings, notes } = await pretend({ truth: { direct: (n) => 400 * n } }).measure({ milliseconds: 100 });
    expect([rows, crossings]).toEqual([[], []]);
    expect(notes.join(" ")).toMatch(/want of time/);
  });

  test("a coarse clock is told", async () => {
    const { notes } = await pretend({ truth: quadratic, step: 1 }).measure();
    expect(notes.join(" ")).toMatch(/step of 1 ms/);
  });
});

test("where there is memory for two methods at a time, they are timed, the notes name the others, and all is given back", async () => {
  const { measure, pretended } = pretend({ truth: quadratic, mostFilters: 2 });
  const { notes, rows } = await measure();
  expect(rows.length).toBeGreaterThan(5);
  expect(notes.join(" ")).toMatch(/memory beside the others: .*fft/);
  expect(pretended.open).toBe(0);
});

describe("what is told meanwhile", () => {
  test("progress never falls and ends with 1; what was measured so far is whole, sorted, plain, and only grows", async () => {
    const told: [number, Crossover][] = [];
    const { measure } = pretend({ truth: quadratic, noise: 0.1 });
    const found = await measure({ onProgress: (progress, soFar) => told.push([progress, soFar]) });
    expect(told.at(-1)).toEqual([1, found]);
    let before = { progress: 0, samples: 0 };
    for (const [progress, soFar] of told) {
      const samples = soFar.rows.reduce((sum, row) => sum + row.samples, 0);
      expect(progress).toBeGreaterThanOrEqual(before.progress);
      expect(samples).toBeGreaterThanOrEqual(before.samples);
      expect(soFar.rows.map(({ size }) => size)).toEqual(soFar.rows.map(({ size }) => size).toSorted((a, b) => a - b));
      expect(JSON.parse(JSON.stringify(soFar))).toEqual(soFar);
      const sizes = new Set(soFar.rows.map(({ size }) => size));
      for (const { interval } of soFar.crossings) for (const end of interval) expect(sizes.has(end)).toBe(true);
      before = { progress, samples };
    }
  });

  test("rows agree with themselves: the fastest is it, quartiles hold the median, regret is what the choice costs", async () => {
    const predicted: CostSurface = { ...quadratic, separable: (n) => 0.3 * n + 1 };
    const { rows } = await pretend({ truth: quadratic, predicted, noise: 0.02 }).measure();
    for (const { milliseconds: times, quartiles, fastest, chosen, regret, predicted: told } of rows) {
      expect(times[fastest]).toBe(Math.min(...Object.values(times)));
      expect(told[chosen]).toBe(Math.min(...Object.values(told)));
      for (const [method, [low, high]] of Object.entries(quartiles) as [Method, [number, number]][]) {
        expect(low).toBeLessThanOrEqual(times[method]!);
        expect(high).toBeGreaterThanOrEqual(times[method]!);
      }
      if (regret > 0) expect(regret).toBeCloseTo(times[chosen]! / times[fastest]! - 1, 2);
    }
    expect(rows.some(({ regret }) => regret > 0.1)).toBe(true);
  });

  test.each([1, 2, 5, 17])("aborted at the progress number %i: the reason is the signal's, and no filter is left", async (k) => {
    const { measure, pretended } = pretend({ truth: quadratic });
    const controller = new AbortController();
    let told = 0;
    const running = measure({ signal: controller.signal, onProgress: () => ++told === k && controller.abort("enough") });
    await expect(running).rejects.toBe("enough");
    expect(pretended.open).toBe(0);
    expect(told).toBeLessThanOrEqual(k + 1);
  });

  test("what onProgress throws ends it, and no filter is left", async () => {
    const { measure, pretended } = pretend({ truth: quadratic });
    const failure = new Error("of the caller");
    await expect(
      measure({
        onProgress: () => {
          throw failure;
        },
      }),
    ).rejects.toBe(failure);
    expect(pretended.open).toBe(0);
  });

  test("the host gets its turn at least every 50 ms of work, as runs of a millisecond go", async () => {
    const { measure, clock } = pretend({ truth: { direct: (n) => 0.1 * n, fft: () => 1 } });
    const begun = clock.time;
    await measure();
    expect(clock.rests).toBeGreaterThan((clock.time - begun) / 50);
  });

  test("what the caller does with its options and with what onProgress was given changes nothing", async () => {
    const { measure } = pretend({ truth: quadratic });
    const options = { channels: 2, sizes: [3, 5, 9], border: { rows: "zero", columns: { constant: [1, 2] } } } satisfies Partial<MeasureCrossoverOptions>;
    const spoil = (_: number, soFar: Crossover): void => {
      soFar.layout.width = 1;
      for (const list of [soFar.rows, soFar.crossings, soFar.notes]) list.length = 0;
    };
    const running = measure({ ...options, onProgress: spoil });
    options.sizes.push(4);
    options.border.columns.constant.pop();
    const { layout: measured, rows, border } = await running;
    expect(measured).toEqual({ ...layout, channels: 2, sample: "u8" });
    expect(rows.map(({ size }) => size)).toEqual([3, 5, 9]);
    expect(border).toEqual({ rows: "zero", columns: { constant: [1, 2] } });
  });

  test("images that the host has no memory for are named as not measured, and no filter is left", async () => {
    const { measure, pretended } = pretend({ truth: quadratic });
    const found = await measure({ width: 16_000_000, height: 16_000_000, channels: 4, sample: "f32", sizes: [3, 5] });
    expect(found).toMatchObject({ rows: [], crossings: [], notes: ["Not measured for want of time or memory: 3×3, 5×5."] });
    expect(pretended.open).toBe(0);
  });

  test("where there is memory for one filter at a time, it is that of the method which the engine would choose", async () => {
    const { measure, pretended } = pretend({ truth: quadratic, mostFilters: 1 });
    const { rows, notes } = await measure();
    expect(new Set(rows.map(({ chosen }) => chosen)).size).toBeGreaterThan(1);
    for (const { chosen, milliseconds: times } of rows) expect(Object.keys(times)).toEqual([chosen]);
    expect(notes.join(" ")).toMatch(/want of memory beside the others/);
    expect(pretended.open).toBe(0);
  });
});
