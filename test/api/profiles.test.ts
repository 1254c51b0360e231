import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { ConvolutionError, box, createEngine, gaussian, type Engine, type HardwareProfile } from "../../src/index.js";
import { operationNames } from "../../src/planning/cost.js";
import { shippedProfiles } from "../../src/planning/profile.js";

const untyped = (value: unknown): HardwareProfile => value as HardwareProfile;
const image = { data: Uint8Array.of(0, 0, 9, 0, 0), width: 5, height: 1 };

/** Made up: every price a number of its own. */
const whole: HardwareProfile = {
  version: 2,
  host: "a made-up machine",
  build: "simd",
  threads: 1,
  date: "2026-01-02T03:04:05.000Z",
  nanoseconds: Object.fromEntries(operationNames.map((name, k) => [name, 0.5 + k])),
  spread: { run: 0.1 },
  checks: [{ problem: "9×9", method: "fft", predicted: 1, measured: 1.5 }],
  verdicts: [{ shape: "a shape", method: "direct", milliseconds: { direct: 1, fft: 2 }, date: "2026-01-02" }],
  notes: ["Made up."],
};

const withPrice = (price: unknown, name = "rowTap"): unknown => ({ ...whole, nanoseconds: { ...whole.nanoseconds, [name]: price } });
const withVerdict = (change: object): unknown => ({ ...whole, verdicts: [{ ...whole.verdicts![0], ...change }] });

/** Passes a check that reads a field once, and would give something else when it is read again. */
const twoFaced = (): unknown => {
  let reads = 0;
  const nanoseconds = { ...whole.nanoseconds };
  Object.defineProperty(nanoseconds, "rowTap", { enumerable: true, get: () => (reads++ === 0 ? 1 : NaN) });
  return { ...whole, nanoseconds };
};

const hostile: [title: string, profile: unknown, says?: RegExp][] = [
  ["null", null, /null/],
  ["a text", JSON.stringify(whole)],
  ["a list", [whole]],
  ["a function", () => whole],
  ["a number", 2],
  ["nothing in it", {}],
  ["version 1", { ...whole, version: 1 }, /version is 1.*version 2/],
  ["version 3", { ...whole, version: 3 }],
  ["the version as text", { ...whole, version: "2" }, /"2"/],
  ["no prices", { ...whole, nanoseconds: undefined }, /missing/],
  ["prices in a list", { ...whole, nanoseconds: Object.values(whole.nanoseconds) }, /an array/],
  ["a price that is missing", withPrice(undefined), /nanoseconds\.rowTap/],
  ["a negative price", withPrice(-1), /-1/],
  ["a price that is barely negative", withPrice(-Number.MIN_VALUE)],
  ["a price that is not a number", withPrice(NaN), /NaN/],
  ["an endless price", withPrice(Infinity), /Infinity/],
  ["a price beyond sense", withPrice(1e300), /1e\+300/],
  ["a price as text", withPrice("5"), /"5"/],
  ["a price that is null, as JSON makes of NaN", withPrice(null), /null/],
  ["a price as an object with a value", withPrice({ valueOf: () => 1 })],
  ["a price as a big integer", withPrice(5n)],
  ["prices that only the prototype has", { ...whole, nanoseconds: Object.create(whole.nanoseconds) }, /nanoseconds/],
  ["a build that there is not", { ...whole, build: "avx" }, /"avx"/],
  ["a build by the name of a prototype's field", { ...whole, build: "__proto__" }],
  ["no threads", { ...whole, threads: 0 }],
  ["half a thread", { ...whole, threads: 1.5 }],
  ["a host that is none", { ...whole, host: { toString: () => "x" } }],
  ["a host of a million letters", { ...whole, host: "x".repeat(1e6) }, /1000000/],
  ["a date that is a number", { ...whole, date: 5 }],
  ["verdicts that are no list", { ...whole, verdicts: { length: 1, 0: whole.verdicts![0] } }],
  ["a hundred thousand verdicts", { ...whole, verdicts: Array.from({ length: 1e5 }, () => whole.verdicts![0]) }, /100000/],
  ["a million notes", { ...whole, notes: Array.from({ length: 1e6 }, () => "note") }],
  ["a verdict for a method that there is not", withVerdict({ method: "fastest" }), /fastest/],
  ["a verdict for a prototype's field", withVerdict({ method: "constructor" })],
  ["a verdict with times by other names", withVerdict({ milliseconds: { toString: 1 } })],
  ["a verdict with a negative time", withVerdict({ milliseconds: { fft: -1 } })],
  ["a verdict without a shape", withVerdict({ shape: undefined })],
  ["a verdict that is null", { ...whole, verdicts: [null] }],
  ["verdicts with holes", { ...whole, verdicts: Array(3) }],
  ["a check that is no check", { ...whole, checks: ["ok"] }],
  ["a note that is no text", { ...whole, notes: [{}] }],
  ["a spread that is not a number", { ...whole, spread: { run: NaN } }],
  ["a spread that is a list", { ...whole, spread: [1] }],
];

let other: Engine;
beforeAll(async () => void (other = await createEngine()));
afterAll(() => other.dispose());

const expectUnharmed = (): void => {
  expect(other.convolve(image, gaussian(1)).data[2]).toBe(4);
  expect(({} as Record<string, unknown>)["polluted"]).toBeUndefined();
  expect(Object.getPrototypeOf({})).toBe(Object.prototype);
};

test.each(hostile)("a profile with or as %s is refused, and engines are unharmed", async (_, profile, says = /./) => {
  const error = await createEngine({ profile: untyped(profile) }).catch((failure: unknown) => failure);
  expect(error).toBeInstanceOf(ConvolutionError);
  expect(error).toMatchObject({ code: "invalid-profile", fault: "caller", message: expect.stringMatching(says) });
  expect((error as Error).message.length).toBeLessThan(500);
  expectUnharmed();
});

test("a field that throws when it is read throws its own error, and engines are unharmed", async () => {
  const failure = new Error("of the caller");
  const throwing = Object.defineProperty({ ...whole }, "host", {
    enumerable: true,
    get: () => {
      throw failure;
    },
  });
  await expect(createEngine({ profile: untyped(throwing) })).rejects.toBe(failure);
  expectUnharmed();
});

test("a field that changes from one look to the next is read once", async () => {
  const engine = await createEngine({ build: "simd", profile: untyped(twoFaced()) });
  expect(engine.profile.nanoseconds["rowTap"]).toBe(1);
  engine.dispose();
});

test("10 MB of JSON are refused for what they hold too much of", async () => {
  const text = JSON.stringify({ ...whole, verdicts: Array.from({ length: 110_000 }, (_, k) => ({ ...whole.verdicts![0], shape: `shape ${k}` })) });
  expect(text.length).toBeGreaterThan(1e7);
  await expect(createEngine({ profile: JSON.parse(text) })).rejects.toMatchObject({ code: "invalid-profile" });
  expectUnharmed();
});

test("keys that JSON may carry and that mean something to JavaScript are left behind, as all that is not known", async () => {
  const text = JSON.stringify(whole).replace(
    /^\{/,
    '{"__proto__":{"polluted":1},"constructor":{"prototype":{"polluted":1}},"toString":5,"extra":[1,2],"secret":"x",',
  );
  const prices = text.replace('"nanoseconds":{', '"nanoseconds":{"__proto__":{"polluted":1},"warpTap":5,');
  const engine = await createEngine({ build: "simd", profile: JSON.parse(prices) });
  expect(engine.profile).toEqual(whole);
  expect(Object.keys(engine.profile)).toEqual(Object.keys(whole));
  expect(Object.keys(engine.profile.nanoseconds)).toEqual(operationNames);
  expectUnharmed();
  engine.dispose();
});

describe("a good profile", () => {
  test("is taken as it is, and comes back as JSON says it", async () => {
    const engine = await createEngine({ build: "simd", profile: JSON.parse(JSON.stringify(whole)) });
    expect(JSON.parse(JSON.stringify(engine.profile))).toEqual(whole);
    engine.dispose();
  });

  test("is a copy both ways: what callers do to theirs changes no engine", async () => {
    const given = structuredClone(whole);
    const engine = await createEngine({ build: "simd", profile: given });
    given.nanoseconds["rowTap"] = NaN;
    given.verdicts!.length = 0;
    const taken = engine.profile;
    taken.nanoseconds["run"] = NaN;
    taken.notes!.push("changed");
    expect(engine.profile).toEqual(whole);
    expect(engine.explain(box(3), { width: 9, height: 9 }).milliseconds).toBeGreaterThan(0);
    engine.dispose();
  });

  test("of another machine gives the same bytes", async () => {
    const engine = await createEngine({ build: "simd", profile: whole });
    for (const method of ["direct", "separable", "fft"] as const)
      expect([...engine.convolve(image, gaussian(1), { method }).data]).toEqual([...other.convolve(image, gaussian(1), { method }).data]);
    engine.dispose();
  });

  test("in which nothing costs anything, or all costs a second, still gives choices", async () => {
    for (const price of [0, 1e9]) {
      const profile = { ...whole, nanoseconds: Object.fromEntries(operationNames.map((name) => [name, price])) };
      const engine = await createEngine({ build: "simd", profile });
      const { milliseconds, candidates } = engine.explain(box(9), { width: 4000, height: 4000, channels: 4 });
      for (const one of [milliseconds, ...candidates.flatMap((candidate) => candidate.milliseconds ?? [])]) expect(Number.isFinite(one)).toBe(true);
      expect(engine.convolve(image, gaussian(1)).data[2]).toBe(4);
      engine.dispose();
    }
  });

  test.each(["scalar", "relaxed-simd"] as const)("of the %s build is refused by an engine of the SIMD build", async (build) => {
    await expect(createEngine({ build: "simd", profile: { ...whole, build } })).rejects.toMatchObject({ code: "invalid-profile" });
  });

  test("of several threads is adapted to one, with a note that is there once", async () => {
    const profile = { ...whole, threads: 4 };
    const engine = await createEngine({ build: "simd", profile });
    const { notes } = engine.profile;
    expect(notes).toEqual(["Made up.", expect.stringMatching(/Measured with 4 threads, used with 1 thread/)]);
    const again = await createEngine({ build: "simd", profile: { ...engine.profile, threads: 4 } });
    expect(again.profile.notes).toEqual(notes);
    for (const one of [engine, again]) one.dispose();
  });

  test("that the package ships is one", async () => {
    for (const profile of shippedProfiles) (await createEngine({ build: profile.build, profile })).dispose();
  });
});
