import { describe, expect, test } from "vitest";
import { Stopwatch } from "../../src/measure/stopwatch.js";
import { PretendedClock } from "./pretendedClock.js";

/** Steps of clocks in milliseconds: Node's, those of browsers with and without isolation, hardened ones, an old timer's. */
const steps = [0, 0.005, 0.1, 1, 16, 100];

describe.each(steps)("by a clock with a step of %f ms", (step) => {
  test("the step is found", () => {
    const { step: found } = new Stopwatch(new PretendedClock(step));
    if (step > 0) expect(found).toBeCloseTo(step, 9);
    else expect(found).toBeLessThan(0.001);
  });

  test.each([0.001, 0.02, 0.5, 7, 300])("a run of %f ms is timed within three of the errors that are told", (run) => {
    const clock = new PretendedClock(step);
    const stopwatch = new Stopwatch(clock);
    for (let sample = 0; sample < 10; sample++) {
      const { milliseconds, clockError } = stopwatch.sample(() => void (clock.time += run), run)!;
      // Looking takes time too, as much as a run or less.
      expect(milliseconds).toBeGreaterThanOrEqual(run * (1 - 3 * clockError));
      expect(milliseconds).toBeLessThanOrEqual((run + clock.lookMilliseconds) * (1 + 3 * clockError) + clock.lookMilliseconds);
    }
  });

  test("a sample lasts no longer than 60 ms and what a run and two steps take", () => {
    const clock = new PretendedClock(step);
    const stopwatch = new Stopwatch(clock);
    for (const [run, expected] of [
      [0.01, 0.01],
      [0.01, 10],
      [5, 0.00001],
      [200, 0.1],
    ] as const) {
      const begun = clock.time;
      stopwatch.sample(() => void (clock.time += run), expected);
      // The number of runs between two looks doubles, so that the last look may come as late as all before took.
      expect(clock.time - begun).toBeLessThanOrEqual(2 * (60 + run + 2 * step));
    }
  });
});

/** A clock to which a thing may happen during a run. */
function disturbed(happens: (clock: PretendedClock) => void): () => unknown {
  const clock = new PretendedClock();
  const stopwatch = new Stopwatch(clock);
  let runs = 0;
  return () =>
    stopwatch.sample(() => {
      clock.time += 0.5;
      if (++runs === 1) happens(clock);
    }, 0.5);
}

test.each([
  ["is put back", (clock: PretendedClock) => void (clock.time -= 500)],
  ["sleeps for an hour", (clock: PretendedClock) => void (clock.time += 3_600_000)],
  ["tells no number", (clock: PretendedClock) => void (clock.time = NaN)],
])("a sample during which the clock %s is none", (_, happens) => {
  expect(disturbed(happens)()).toBeUndefined();
});

test("where it is so again and again, the clock is of no use", () => {
  const clock = new PretendedClock();
  const stopwatch = new Stopwatch(clock);
  const sampleAll = (): void => {
    for (let sample = 0; sample < 40; sample++) stopwatch.sample(() => void (clock.time += sample % 3 === 0 ? -5 : 0.5), 0.5);
  };
  expect(sampleAll).toThrowError(expect.objectContaining({ code: "clock-unusable" }));
});

test("now and then does not matter", () => {
  const clock = new PretendedClock();
  const stopwatch = new Stopwatch(clock);
  let runs = 0;
  for (let sample = 0; sample < 400; sample++) stopwatch.sample(() => void (clock.time += ++runs % 20 === 0 ? -5 : 0.5), 0.5);
  expect(runs).toBeGreaterThan(400);
});

test("time passes forwards only, whatever the clock does", () => {
  const clock = new PretendedClock();
  const stopwatch = new Stopwatch(clock);
  let before = stopwatch.now();
  for (const change of [5, -100, 3, NaN, 7]) {
    const { time } = clock;
    clock.time += change;
    const now = stopwatch.now();
    expect(now).toBeGreaterThanOrEqual(before);
    if (change > 0) expect(now - before).toBeCloseTo(change, 1);
    if (Number.isNaN(clock.time)) clock.time = time;
    before = now;
  }
});

test("others get their turn every 12 ms, and an aborted signal ends it there", async () => {
  const clock = new PretendedClock();
  const controller = new AbortController();
  const stopwatch = new Stopwatch(clock, controller.signal);
  for (let pause = 0; pause < 120; pause++) {
    clock.time += 1;
    await stopwatch.pause();
  }
  expect(clock.rests).toBe(10);
  controller.abort("enough");
  clock.time += 20;
  await expect(stopwatch.pause()).rejects.toBe("enough");
});
