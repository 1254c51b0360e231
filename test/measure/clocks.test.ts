import { expect, test } from "vitest";
import { ConvolutionError, createEngine, gaussian, type Engine, type HardwareProfile } from "../../src/index.js";
import { crossoverBy } from "../../src/measure/crossover.js";
import { profileBy } from "../../src/measure/profile.js";
import type { Clock } from "../../src/measure/clock.js";
import { chance } from "./chance.js";

/** More questions than this, and the measurement would not end. */
const mostQuestions = 60_000_000;

/** The real time, faster, as a clock shows it that is not what it should be; the host rests as usual. */
function clockThat(shows: (milliseconds: number, question: number) => number, speed = 10): Clock {
  const begun = performance.now();
  let question = 0;
  return {
    now: () => {
      if (++question > mostQuestions) throw new Error("the measurement does not end");
      return shows((performance.now() - begun) * speed, question);
    },
    yield: (resume) => void setTimeout(resume, 0),
  };
}

const dice = chance(7);
/** Made-up steps of 1…30 ms. */
const unevenSteps = Array.from({ length: 100_000 }, () => dice.between(1, 30)).reduce<number[]>(
  (times, step) => (times.push((times.at(-1) ?? 0) + step), times),
  [],
);

/** The last of the steps that time has come to. */
function afterUnevenStep(milliseconds: number): number {
  let [low, high] = [0, unevenSteps.length - 1];
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (unevenSteps[middle]! <= milliseconds) low = middle;
    else high = middle - 1;
  }
  return unevenSteps[low]!;
}

const coarse =
  (step: number) =>
  (milliseconds: number): number =>
    Math.floor(milliseconds / step) * step;

/** Clocks that measuring copes with. */
const poor: [name: string, clock: () => Clock][] = [
  ["a step of 1 ms", () => clockThat(coarse(1))],
  ["a step of 100 ms", () => clockThat(coarse(100), 40)],
  ["steps of 1…30 ms", () => clockThat(afterUnevenStep, 20)],
  ["a jump back of 40 ms now and then", () => clockThat((milliseconds) => milliseconds - 40 * Math.floor(milliseconds / 100))],
  ["a jump back of 500 ms once", () => clockThat((milliseconds) => (milliseconds > 300 ? milliseconds - 500 : milliseconds))],
  ["a jump ahead by an hour once", () => clockThat((milliseconds) => milliseconds + (milliseconds > 400 ? 3_600_000 : 0))],
  ["a jump ahead by an hour now and then", () => clockThat((milliseconds) => milliseconds + 3_600_000 * Math.floor(milliseconds / 700))],
  ["every thousandth answer no number", () => clockThat((milliseconds, question) => (question % 1000 === 0 ? NaN : milliseconds))],
  ["very large numbers", () => clockThat((milliseconds) => 1e12 + milliseconds)],
];

/** Clocks that nothing can be told from, sooner or later. */
const hopeless: [name: string, clock: () => Clock][] = [
  ["that stands still", () => ({ ...clockThat(() => 5), now: () => 5 })],
  ["that stands still after a while", () => clockThat((milliseconds) => Math.min(milliseconds, 60))],
  ["that runs backwards", () => clockThat((milliseconds) => -milliseconds)],
  ["that tells no number", () => clockThat(() => NaN)],
  ["that tells no number after a while", () => clockThat((milliseconds) => (milliseconds > 100 ? NaN : milliseconds))],
  ["that tells infinity", () => ({ ...clockThat(() => Infinity), now: () => Infinity })],
  ["that begins anew every 3 ms", () => clockThat((milliseconds) => milliseconds % 3)],
  ["that swings", () => clockThat((milliseconds) => 50 * Math.abs(((milliseconds / 50) % 2) - 1))],
];

const unusable = { code: "clock-unusable", fault: "host" };
const milliseconds = 1000;

async function expectUsable(profile: HardwareProfile, engine: Engine): Promise<void> {
  for (const price of Object.values(profile.nanoseconds)) expect(Number.isFinite(price) && price >= 0).toBe(true);
  for (const spread of Object.values(profile.spread ?? {})) expect(Number.isFinite(spread) && spread > 0).toBe(true);
  expect(JSON.stringify(profile)).not.toMatch(/null/);
  const fitted = await createEngine({ build: engine.build, profile: JSON.parse(JSON.stringify(profile)) });
  expect(fitted.explain(gaussian(2), { width: 50, height: 40 }).milliseconds).toBeGreaterThan(0);
  fitted.dispose();
}

async function outcomeOf<T>(promise: Promise<T>): Promise<T | ConvolutionError> {
  try {
    return await promise;
  } catch (error) {
    if (error instanceof ConvolutionError) return error;
    throw error;
  }
}

test.each(poor)("a clock with %s: the profile is usable, or the clock is named as not to be used", async (_, clock) => {
  const engine = await createEngine();
  const outcome = await outcomeOf(profileBy(clock(), engine, { milliseconds }));
  if (outcome instanceof ConvolutionError) expect(outcome).toMatchObject(unusable);
  else await expectUsable(outcome, engine);
  expect(engine.convolve({ data: Uint8Array.of(1, 2, 3), width: 3, height: 1 }, gaussian(1)).data.length).toBe(3);
  engine.dispose();
});

test.each(poor.slice(0, 3))("a clock with %s is no reason to measure nothing, and the notes tell it", async (_, clock) => {
  const engine = await createEngine();
  const { notes } = await profileBy(clock(), engine, { milliseconds: 20 * milliseconds });
  expect(notes!.join(" ")).toMatch(/^[1-9]\d* experiments\. The clock has a step of/);
  engine.dispose();
});

test.each(poor)("a clock with %s: rows are of finite numbers", async (_, clock) => {
  const engine = await createEngine();
  const outcome = await outcomeOf(crossoverBy(clock(), engine, { width: 64, height: 48, milliseconds, sizes: [3, 9, 15, 31] }));
  if (outcome instanceof ConvolutionError) expect(outcome).toMatchObject(unusable);
  else {
    for (const { milliseconds: times, quartiles, regret } of outcome.rows) {
      for (const one of [...Object.values(times), ...Object.values(quartiles).flat()]) expect(one > 0 && Number.isFinite(one)).toBe(true);
      expect(regret >= 0 && Number.isFinite(regret)).toBe(true);
    }
    expect(JSON.stringify(outcome)).not.toMatch(/null/);
  }
  engine.dispose();
});

test.each(hopeless)("a clock %s is named as not to be used, in bounded time, and the engine works on", async (_, clock) => {
  const engine = await createEngine();
  await expect(profileBy(clock(), engine, { milliseconds })).rejects.toMatchObject(unusable);
  await expect(crossoverBy(clock(), engine, { width: 64, height: 48, milliseconds })).rejects.toMatchObject(unusable);
  expect(engine.convolve({ data: Uint8Array.of(1, 2, 3), width: 3, height: 1 }, gaussian(1)).data.length).toBe(3);
  engine.dispose();
});
