import { afterEach, describe, expect, test } from "vitest";
import { gaussian, scaled, type Candidate, type Engine, type EngineOptions, type HardwareProfile, type Kernel, type Method } from "../../src/index.js";
import { engineWithPacing } from "../../src/api/engine.js";
import { mostVerdicts } from "../../src/api/validate/profile.js";
import { shippedProfiles } from "../../src/planning/profile.js";
import { knownLimit, memoryLeft } from "../measure/memoryLeft.js";
import { noiseKernel } from "../support/kernels.js";
import { firstDifference } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";

/** A clock by which the methods that are tried take, in the order in which they are tried, the milliseconds that a test says. */
class TrialClock {
  looks = 0;
  firstMilliseconds = 0;
  #time = 0;
  readonly #turnMilliseconds: readonly number[];
  /** Called at each look. */
  onLook = (): void => undefined;

  constructor(turnMilliseconds: readonly number[]) {
    this.#turnMilliseconds = turnMilliseconds;
  }

  /** One look before the run that is not counted, one after it, and one to begin with; then, in each turn, one before and one after each method, and one at the end. */
  now = (): number => {
    const look = this.looks++ - 3;
    if (look === -2) this.#time += this.firstMilliseconds;
    const place = look < 0 ? 0 : look % (2 * this.#turnMilliseconds.length + 1);
    if (look >= 0 && place % 2 === 1) this.#time += this.#turnMilliseconds[place >> 1]!;
    this.onLook();
    return this.#time;
  };

  yield = (resume: () => void): void => void setTimeout(resume, 0);
}

/** Made up: a machine that is so slow that one run makes a turn, for the clock to be in step. */
function slowMachine(factor = 32): HardwareProfile {
  const [shipped] = shippedProfiles;
  const prices = Object.entries(shipped!.nanoseconds).map(([name, price]) => [name, Math.min(1e9, price * factor)]);
  return { ...shipped!, nanoseconds: Object.fromEntries(prices) };
}

const engines: Engine[] = [];
async function engineBy(clock: { now(): number; yield(resume: () => void): void }, options: EngineOptions = {}): Promise<Engine> {
  const engine = await engineWithPacing({ build: "simd", memoryLimit: knownLimit, profile: slowMachine(), ...options }, clock);
  engines.push(engine);
  return engine;
}
afterEach(() => {
  for (const engine of engines.splice(0)) engine.dispose();
});

const layout = { width: 200, height: 150, channels: 1, sample: "f32" } as const;
const image = noiseImage("f32", 200, 150, 1, 4);
const tapsOf = (size: number, seed = 3): Kernel => scaled(noiseKernel(size, size, seed), 1 / (size * size));
const open = (candidates: readonly Candidate[]): Candidate[] =>
  candidates.filter(({ refused }) => refused === undefined).toSorted((a, b) => a.milliseconds! - b.milliseconds!);

/** A kernel for which two methods are predicted to be near each other: the predicted one and the other. */
async function closeRace(): Promise<{ taps: Kernel; size: number; predicted: Method; other: Method }> {
  const engine = await engineBy(new TrialClock([1, 1]));
  const races = Array.from({ length: 20 }, (_, k) => {
    const size = 5 + 2 * k;
    const [first, second] = open(engine.explain(tapsOf(size), layout).candidates);
    return { size, predicted: first!.method, other: second!.method, ratio: second!.milliseconds! / first!.milliseconds! };
  });
  const { size, predicted, other } = races.reduce((a, b) => (b.ratio < a.ratio ? b : a));
  return { taps: tapsOf(size), size, predicted, other };
}

const race = await closeRace();

/** An engine that has found the other method to be the faster one. */
async function triedEngine(options: EngineOptions = {}, turns = [9, 3]): Promise<{ engine: Engine; clock: TrialClock }> {
  const clock = new TrialClock(turns);
  const engine = await engineBy(clock, options);
  engine.prepare(race.taps, layout, { measure: true }).dispose();
  return { engine, clock };
}

describe("prepare with a trial", () => {
  test("takes the method that was fastest, says so, and tells the times", async () => {
    const clock = new TrialClock([9, 3]);
    const engine = await engineBy(clock);
    const { method, because } = engine.prepare(race.taps, layout, { measure: true }).explanation;
    expect(method).toBe(race.other);
    expect(because).toMatch(/timed/);
    const [verdict] = engine.profile.verdicts!;
    expect(verdict!.method).toBe(race.other);
    expect(verdict!.milliseconds[race.predicted]! / verdict!.milliseconds[race.other]!).toBeGreaterThan(1);
  });

  test("is not repeated: the verdict is remembered for the shape, whatever the taps are", async () => {
    const { engine, clock } = await triedEngine();
    const { looks } = clock;
    expect(looks).toBeGreaterThan(4);
    for (const taps of [race.taps, tapsOf(race.size, 8)])
      for (const options of [{ measure: true }, {}]) expect(engine.prepare(taps, layout, options).explanation.method).toBe(race.other);
    expect(clock.looks).toBe(looks);
    expect(engine.profile.verdicts!.length).toBe(1);
  });

  test("says nothing about other shapes", async () => {
    const { engine } = await triedEngine();
    const plain = await engineBy(new TrialClock([1, 1]));
    for (const [taps, where] of [
      [tapsOf(race.size + 2), layout],
      [race.taps, { ...layout, width: 201 }],
      [race.taps, { ...layout, sample: "u8" }],
      [gaussian({ sigma: 2, radius: (race.size - 1) / 2 }), layout],
    ] as const)
      expect(String(engine.explain(taps, where))).toBe(String(plain.explain(taps, where)));
    expect(engine.explain(race.taps, layout, { border: "zero" }).because).not.toMatch(/timed/);
  });

  test("is what explain tells afterwards, and explain makes none itself", async () => {
    const clock = new TrialClock([9, 3]);
    const engine = await engineBy(clock);
    expect(engine.explain(race.taps, layout, { measure: true }).method).toBe(race.predicted);
    expect(clock.looks).toBe(0);
    engine.prepare(race.taps, layout, { measure: true });
    expect(engine.explain(race.taps, layout)).toMatchObject({ method: race.other, because: expect.stringMatching(/timed/) });
  });

  test("decides what run executes: the bytes are those of the method by name", async () => {
    const { engine } = await triedEngine();
    const forced = engine.convolve(image, race.taps, { method: race.other }).data;
    expect(firstDifference(engine.prepare(race.taps, layout).run(image).data, forced)).toBeUndefined();
  });

  test("decides nothing for single calls, in which setting up counts too", async () => {
    const { engine } = await triedEngine();
    const plain = await engineBy(new TrialClock([1, 1]));
    expect(firstDifference(engine.convolve(image, race.taps).data, plain.convolve(image, race.taps).data)).toBeUndefined();
  });

  test("keeps the predicted method where times are level", async () => {
    const { engine } = await triedEngine({}, [10, 9.9]);
    expect(engine.explain(race.taps, layout).method).toBe(race.predicted);
    expect(engine.profile.verdicts![0]!.method).toBe(race.predicted);
  });

  test("is not made for a method by name, nor without being asked for", async () => {
    const clock = new TrialClock([9, 3]);
    const engine = await engineBy(clock);
    expect(engine.prepare(race.taps, layout, { measure: true, method: race.predicted }).explanation.method).toBe(race.predicted);
    expect(engine.prepare(race.taps, layout).explanation.method).toBe(race.predicted);
    expect(engine.prepare(race.taps, layout, { measure: false }).explanation.method).toBe(race.predicted);
    expect(clock.looks).toBe(0);
    expect(engine.profile.verdicts).toBeUndefined();
  });

  test("is not made where one method is far ahead", async () => {
    const clock = new TrialClock([9, 3]);
    const engine = await engineBy(clock);
    engine.prepare(gaussian({ sigma: 4, radius: 12 }), { ...layout, width: 600, height: 400 }, { measure: true });
    const all = open(engine.explain(gaussian({ sigma: 4, radius: 12 }), { ...layout, width: 600, height: 400 }).candidates);
    expect(clock.looks > 0).toBe(all[1]!.milliseconds! <= 2.5 * all[0]!.milliseconds!);
  });
});

describe("a verdict travels with the profile", () => {
  test("as JSON, to another engine, which makes no trial", async () => {
    const { engine } = await triedEngine();
    const clock = new TrialClock([3, 9]);
    const next = await engineBy(clock, { profile: JSON.parse(JSON.stringify(engine.profile)) });
    expect(next.profile.verdicts).toEqual(engine.profile.verdicts);
    expect(next.prepare(race.taps, layout, { measure: true }).explanation.method).toBe(race.other);
    expect(clock.looks).toBe(0);
  });

  test("no more of them are kept than a profile may hold: the oldest goes", async () => {
    const race = await closeRace();
    const full = Array.from({ length: mostVerdicts }, (_, k) => ({ shape: `made up ${k}`, method: "fft" as const, milliseconds: {}, date: "2026-01-01" }));
    const engine = await engineBy(new TrialClock([5, 1]), { profile: { ...slowMachine(), verdicts: full } });
    engine.prepare(race.taps, layout, { measure: true });
    const { verdicts } = engine.profile;
    expect(verdicts).toHaveLength(mostVerdicts);
    expect(verdicts![0]!.shape).toBe("made up 1");
    expect(verdicts!.at(-1)!.shape).toContain("200×150");
    await engineBy(new TrialClock([1, 1]), { profile: engine.profile });
  });

  const withVerdict = async (method: Method): Promise<HardwareProfile> => {
    const { profile } = (await triedEngine()).engine;
    return { ...profile, verdicts: [{ ...profile.verdicts![0]!, method }] };
  };

  test("for a method that does not apply it is passed over", async () => {
    const engine = await engineBy(new TrialClock([1, 1]), { profile: await withVerdict("running-sum") });
    expect(engine.explain(race.taps, layout)).toMatchObject({ method: race.predicted, because: expect.not.stringMatching(/timed/) });
    engine.prepare(race.taps, layout).dispose();
  });

  test("for a method that does not fit it is passed over", async () => {
    const { bytes } = (await triedEngine()).engine.explain(race.taps, layout, { method: "fft" });
    const profile = await withVerdict("fft");
    const engine = await engineBy(new TrialClock([1, 1]), { profile, memoryLimit: bytes });
    const { candidates, method } = engine.explain(race.taps, layout);
    const fft = candidates.find((one) => one.method === "fft")!;
    expect(method === "fft").toBe(fft.refused === undefined);
    engine.prepare(race.taps, layout).dispose();
  });
});

describe("time and memory of a trial", () => {
  test("nine turns are enough, and fewer where turns are long: it ends with the turn in which 200 ms are over", async () => {
    for (const [turn, turns] of [
      [1, 9],
      [30, 4],
      [150, 1],
      [5000, 1],
    ] as const) {
      const { clock } = await triedEngine({}, [turn, turn]);
      expect(clock.looks).toBe(3 + 5 * turns);
    }
  });

  test("a machine that is so much slower than predicted that one run takes over a second gets no trial", async () => {
    for (const [firstMilliseconds, verdicts] of [
      [900, 1],
      [1100, undefined],
    ] as const) {
      const clock = Object.assign(new TrialClock([9, 3]), { firstMilliseconds });
      const engine = await engineBy(clock);
      const { method } = engine.prepare(race.taps, layout, { measure: true }).explanation;
      expect(engine.profile.verdicts?.length).toBe(verdicts);
      expect(method).toBe(verdicts ? race.other : race.predicted);
    }
  });

  test("methods that are predicted to take a second are not tried", async () => {
    const { engine, clock } = await triedEngine({ profile: slowMachine(6000) });
    expect(engine.explain(race.taps, layout).milliseconds).toBeGreaterThan(500);
    expect(clock.looks).toBe(0);
  });

  test.each([
    ["is larger than all memory", { width: 16_000_000, height: 16_000_000, channels: 4, sample: "f32" }],
    ["would take longer to fill than the trial takes", { width: 20_000, height: 8000, channels: 4, sample: "f32" }],
  ] as const)("a small region of an image that %s is not tried, and predictions decide", async (_, large) => {
    const clock = new TrialClock([9, 3]);
    const engine = await engineBy(clock);
    const region = { x: 0, y: 0, width: 200, height: 150 };
    const filter = engine.prepare(race.taps, large, { measure: true, alpha: "none", region });
    expect(filter.explanation).toMatchObject({ method: engine.explain(race.taps, large, { alpha: "none", region }).method });
    expect(clock.looks).toBe(0);
  });

  test("a profile in which nothing takes any time does not make it longer: the clock is looked at in between", async () => {
    let runs = 0;
    const { now } = performance;
    const clock = { now: () => (runs++, now.call(performance)), yield: (resume: () => void) => void setTimeout(resume, 0) };
    const engine = await engineBy(clock, { profile: slowMachine(0), memoryLimit: 2 ** 28 });
    const begun = performance.now();
    engine.prepare(tapsOf(25), { width: 1500, height: 1500, sample: "f32" }, { measure: true }).dispose();
    // Predicted: 0 ms, so 3000 runs a turn; each takes some 20 ms.
    expect(performance.now() - begun).toBeLessThan(60_000);
    expect(runs).toBeGreaterThan(4);
  });

  test.each([
    ["stands still", () => 5],
    [
      "runs backwards",
      (
        (time) => () =>
          --time
      )(0),
    ],
    ["tells no number", () => NaN],
  ])("by a clock that %s there is no verdict, and predictions decide", async (_, now) => {
    const engine = await engineBy({ now, yield: (resume) => void setTimeout(resume, 0) });
    expect(engine.prepare(race.taps, layout, { measure: true }).explanation.method).toBe(race.predicted);
    expect(engine.profile.verdicts).toBeUndefined();
  });

  test("all that was tried gives its memory back, and the filter does with dispose", async () => {
    const engine = await engineBy(new TrialClock([9, 3]));
    const before = memoryLeft(engine);
    const filter = engine.prepare(race.taps, layout, { measure: true });
    const { bytes } = filter.explanation;
    expect(before - memoryLeft(engine)).toBeLessThanOrEqual(bytes + 65_536);
    filter.dispose();
    expect(memoryLeft(engine)).toBe(before);
  });

  test("where there is memory for one of them at a time, predictions decide", async () => {
    const probe = (await triedEngine()).engine;
    const most = Math.max(
      ...open(probe.explain(race.taps, layout).candidates)
        .slice(0, 2)
        .map(({ bytes }) => bytes!),
    );
    for (let memoryLimit = most + 65_536; memoryLimit < 3 * most; memoryLimit += 65_536) {
      const engine = await engineBy(new TrialClock([9, 3]), { memoryLimit });
      let filter;
      try {
        filter = engine.prepare(race.taps, layout, { measure: true });
      } catch (error) {
        expect(error).toMatchObject({ code: "memory-limit" });
        continue;
      }
      expect(filter.explanation.method).toBe(engine.profile.verdicts ? race.other : engine.explain(race.taps, layout).method);
      expect(filter.run(image).data.length).toBe(image.data.length);
    }
  });

  test("a filter that has less memory beside the others than alone is not timed: its tiles would be smaller", async () => {
    const taps = scaled(noiseKernel(11, 11, 3), 1 / 121);
    const wide = { width: 1280, height: 100, channels: 4, sample: "f32" } as const;
    const verdicts = async (memoryLimit: number): Promise<{ count: number; together: number }> => {
      const engine = await engineBy(new TrialClock([9, 3]), { memoryLimit });
      const [first, second] = open(engine.explain(taps, wide, { alpha: "none" }).candidates);
      engine.prepare(taps, wide, { alpha: "none", measure: true }).dispose();
      return { count: engine.profile.verdicts?.length ?? 0, together: first!.bytes! + second!.bytes! };
    };
    const short = await verdicts(2 ** 20);
    expect(short.together).toBeGreaterThan(2 ** 20);
    expect(short.count).toBe(0);
    expect((await verdicts(2 ** 23)).count).toBe(1);
  });

  test("an engine that is disposed during a trial says so, and a filter that another call made lives on until then", async () => {
    const clock = new TrialClock([9, 3]);
    const engine = await engineBy(clock);
    clock.onLook = () => {
      if (clock.looks === 4) engine.dispose();
    };
    expect(() => engine.prepare(race.taps, layout, { measure: true })).toThrowError(expect.objectContaining({ code: "disposed" }));
  });

  test("a clock that throws ends it, and no memory is lost", async () => {
    const clock = new TrialClock([9, 3]);
    const engine = await engineBy(clock);
    const before = memoryLeft(engine);
    const failure = new Error("of the clock");
    clock.onLook = () => {
      if (clock.looks === 4) throw failure;
    };
    expect(() => engine.prepare(race.taps, layout, { measure: true })).toThrow(failure);
    expect(memoryLeft(engine)).toBe(before);
    expect(engine.profile.verdicts).toBeUndefined();
  });
});

test.each(["yes", 1, null, {}])("measure: %j is refused", async (measure) => {
  const engine = await engineBy(new TrialClock([1, 1]));
  for (const act of [() => engine.prepare(race.taps, layout, { measure } as never), () => engine.explain(race.taps, layout, { measure } as never)])
    expect(act).toThrowError(expect.objectContaining({ code: "unknown-value", message: expect.stringMatching(/measure/) }));
});

test("a single call has nothing to measure: the option is unknown there", async () => {
  const engine = await engineBy(new TrialClock([1, 1]));
  expect(() => engine.convolve(image, race.taps, { measure: true } as never)).toThrowError(expect.objectContaining({ code: "unknown-option" }));
});
