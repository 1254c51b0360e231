import { describe, expect, test } from "vitest";
import type { HardwareProfile } from "../../src/index.js";
import { keepProfile, keptProfile, type ProfileStore } from "../../src/measure/index.js";
import { operationNames } from "../../src/planning/cost.js";

/** Made up. */
const profileOf = (change: Partial<HardwareProfile> = {}): HardwareProfile => ({
  version: 2,
  host: "a made-up machine",
  build: "simd",
  threads: 1,
  date: "2026-01-02T03:04:05.000Z",
  nanoseconds: Object.fromEntries(operationNames.map((name, k) => [name, k])),
  ...change,
});

/** A page's store, in memory. */
class MemoryStore implements ProfileStore {
  readonly texts = new Map<string, string>();
  getItem = (key: string): string | null => this.texts.get(key) ?? null;
  setItem = (key: string, value: string): void => void this.texts.set(key, value);
  removeItem = (key: string): void => void this.texts.delete(key);
}

const engine = { build: "simd", threads: 1 } as const;

describe("a profile that is kept", () => {
  test("is there the next time", () => {
    const store = new MemoryStore();
    keepProfile(profileOf(), store);
    expect(keptProfile(engine, store)).toEqual(profileOf());
  });

  test("takes the place of the one before", () => {
    const store = new MemoryStore();
    keepProfile(profileOf(), store);
    keepProfile(profileOf({ host: "another" }), store);
    expect(keptProfile(engine, store)!.host).toBe("another");
    expect(store.texts.size).toBe(1);
  });

  test("stands beside those of other builds and thread counts", () => {
    const store = new MemoryStore();
    const all = [profileOf(), profileOf({ build: "scalar" }), profileOf({ threads: 4 })];
    for (const profile of all) keepProfile(profile, store);
    for (const profile of all) expect(keptProfile(profile, store)).toEqual(profile);
    expect(keptProfile({ build: "relaxed-simd", threads: 1 }, store)).toBeUndefined();
  });

  test("holds nothing but a profile's fields", () => {
    const store = new MemoryStore();
    keepProfile({ ...profileOf(), secret: "of the page" } as HardwareProfile, store);
    expect([...store.texts.values()].join("")).not.toContain("secret");
  });
});

test("there is none at first", () => {
  expect(keptProfile(engine, new MemoryStore())).toBeUndefined();
});

describe("what is no profile of this build is thrown away", () => {
  test.each([
    ["a text that is no JSON", "{"],
    ["an empty text", ""],
    ["null", "null"],
    ["another version", JSON.stringify({ ...profileOf(), version: 1 })],
    ["a price that is null", JSON.stringify({ ...profileOf(), nanoseconds: { ...profileOf().nanoseconds, run: NaN } })],
    ["a profile of another build", JSON.stringify(profileOf({ build: "scalar" }))],
    ["a profile of more threads", JSON.stringify(profileOf({ threads: 2 }))],
    ["ten million letters", JSON.stringify({ ...profileOf(), notes: "x".repeat(1e7) })],
  ])("%s", (_, text) => {
    const store = new MemoryStore();
    keepProfile(profileOf(), store);
    const [key] = [...store.texts.keys()];
    store.setItem("of the page", "stays");
    store.setItem(key!, text);
    expect(keptProfile(engine, store)).toBeUndefined();
    expect([...store.texts]).toEqual([["of the page", "stays"]]);
    keepProfile(profileOf(), store);
    expect(keptProfile(engine, store)).toEqual(profileOf());
  });
});

describe("a store that fails", () => {
  const failure = new Error("QuotaExceededError");
  const full = Object.assign(new MemoryStore(), {
    setItem: () => {
      throw failure;
    },
  });

  test("full: the error says so, with its cause", () => {
    expect(() => keepProfile(profileOf(), full)).toThrowError(
      expect.objectContaining({ code: "not-supported", cause: failure, message: expect.stringMatching(/full/) }),
    );
  });

  test("that may not be read: an error of ours, with its cause", () => {
    const locked = Object.assign(new MemoryStore(), {
      getItem: () => {
        throw failure;
      },
    });
    expect(() => keptProfile(engine, locked)).toThrowError(expect.objectContaining({ code: "not-supported", cause: failure }));
  });

  test("that is not there", () => {
    const before = Object.getOwnPropertyDescriptor(globalThis, "localStorage");
    const refuse = (): never => {
      throw failure;
    };
    for (const descriptor of [{ value: undefined }, { get: refuse }]) {
      Object.defineProperty(globalThis, "localStorage", { configurable: true, ...descriptor });
      try {
        for (const act of [() => keepProfile(profileOf()), () => keptProfile(engine)])
          expect(act).toThrowError(expect.objectContaining({ code: "not-supported", message: expect.stringMatching(/localStorage/) }));
      } finally {
        if (before) Object.defineProperty(globalThis, "localStorage", before);
        else delete (globalThis as { localStorage?: unknown }).localStorage;
      }
    }
  });

  test("what is no profile is not kept", () => {
    const store = new MemoryStore();
    expect(() => keepProfile({} as HardwareProfile, store)).toThrowError(expect.objectContaining({ code: "invalid-profile" }));
    expect(store.texts.size).toBe(0);
  });
});
