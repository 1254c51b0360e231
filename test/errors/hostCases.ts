import { createEngine, kernel, type ErrorCode, type HardwareProfile } from "../../src/index.js";
import { crossoverBy } from "../../src/measure/crossover.js";
import { profileBy } from "../../src/measure/profile.js";
import { hostPacing } from "../../src/runtime/pacing.js";
import * as simdCore from "../../src/generated/simd.js";
import { untyped, type ErrorCase } from "./errorCase.js";

/** Runs with another value of a global, and puts the old one back. */
async function withGlobal(name: "WebAssembly", value: unknown, act: () => Promise<unknown>): Promise<unknown> {
  const before = Object.getOwnPropertyDescriptor(globalThis, name)!;
  Object.defineProperty(globalThis, name, { ...before, value });
  try {
    return await act();
  } finally {
    Object.defineProperty(globalThis, name, before);
  }
}

/** A host whose content security policy forbids to compile, in the words of Chromium. */
function blockedWebAssembly(): object {
  const refuse = (): never => {
    throw new WebAssembly.CompileError(
      "WebAssembly.Module(): Compiling or instantiating WebAssembly module violates the following Content Security policy directive because " +
        "neither 'wasm-eval' nor 'unsafe-eval' is an allowed source of script",
    );
  };
  const { Memory, Table, Global, Instance, CompileError, LinkError, RuntimeError, validate } = WebAssembly;
  const rejectLater = async (): Promise<never> => refuse();
  function Module(): never {
    return refuse();
  }
  return { Memory, Table, Global, Instance, CompileError, LinkError, RuntimeError, validate, Module, compile: rejectLater, instantiate: rejectLater };
}

function bytesOf(hex: string): Uint8Array<ArrayBuffer> {
  return Uint8Array.from(Buffer.from(hex, "hex"));
}

/** f32x4.mul in the binary format of WebAssembly (SIMD opcode 230). */
const vectorProduct = [0xfd, 0xe6, 0x01];

/** The core with every vector product replaced by other code of three bytes: it links, and goes wrong in its own way. */
function brokenCore(replacement: readonly number[]): WebAssembly.Module {
  const code = Object.values(simdCore).find((value) => typeof value === "string" && value.length > 1000) as string;
  const bytes = bytesOf(code);
  let replaced = 0;
  for (let index = 0; index + 2 < bytes.length; index++) {
    if (vectorProduct.some((byte, place) => bytes[index + place] !== byte)) continue;
    bytes.set(replacement, index);
    replaced++;
  }
  if (replaced === 0) throw new Error("the core has no vector product to break");
  return new WebAssembly.Module(bytes);
}

/** f32x4.sub; and a trap with two instructions that do nothing. */
const vectorDifference = [0xfd, 0xe5, 0x01];
const trap = [0x00, 0x01, 0x01];

/** A module that has nothing of what the engine calls. */
const emptyModule = (): WebAssembly.Module => new WebAssembly.Module(Uint8Array.of(0, 0x61, 0x73, 0x6d, 1, 0, 0, 0));

/** A host that has no memory left when the engine asks for more. */
async function withoutMemory(act: () => unknown): Promise<unknown> {
  const { grow } = WebAssembly.Memory.prototype;
  WebAssembly.Memory.prototype.grow = () => {
    throw new RangeError("WebAssembly.Memory.grow(): Unable to grow instance memory");
  };
  try {
    return await act();
  } finally {
    WebAssembly.Memory.prototype.grow = grow;
  }
}

/** The host, with another clock. */
const withClock = (now: () => number) => ({ ...hostPacing(), now });

/** Each look tells an earlier time than the one before. */
function backwards(): () => number {
  let time = 0;
  return () => --time;
}

const profile = (change: object): HardwareProfile =>
  untyped({ version: 2, host: "a test", build: "simd", threads: 1, date: "2026-01-01", nanoseconds: {}, ...change });

export const states: Pick<
  Record<ErrorCode, ErrorCase[]>,
  "disposed" | "invalid-profile" | "memory-limit" | "memory-exhausted" | "webassembly-missing" | "webassembly-blocked" | "self-test-failed" | "clock-unusable"
> = {
  disposed: [
    {
      title: "run after the filter is disposed",
      act: ({ filter, image }) => {
        const made = filter();
        made.dispose();
        made.dispose();
        return made.run(image);
      },
      says: [/disposed/],
    },
    {
      title: "convolve after the engine is disposed",
      act: async ({ image, kernel: taps }) => {
        const engine = await createEngine();
        engine.dispose();
        engine.dispose();
        return engine.convolve(image, taps);
      },
      says: [/disposed/],
    },
    {
      title: "prepare after the engine is disposed",
      act: async ({ kernel: taps }) => {
        const engine = await createEngine();
        engine.dispose();
        return engine.prepare(taps, { width: 3, height: 3 });
      },
    },
    {
      title: "run after the engine is disposed",
      act: async ({ image, kernel: taps }) => {
        const engine = await createEngine();
        const filter = engine.prepare(taps, { width: 6, height: 5 });
        engine.dispose();
        return filter.run(image);
      },
    },
    {
      title: "runAsync after the filter is disposed",
      act: ({ filter, image }) => {
        const made = filter();
        made.dispose();
        return made.runAsync(image);
      },
      says: [/runAsync/],
    },
    {
      title: "a filter that is disposed while it runs and while others wait",
      act: async ({ filter, image }) => {
        const made = filter();
        const jobs = [made.runAsync(image), made.runAsync(image)];
        made.dispose();
        const ends = await Promise.allSettled(jobs);
        if (ends.some(({ status }) => status === "fulfilled")) return;
        throw (ends[1] as PromiseRejectedResult).reason;
      },
    },
    {
      title: "an engine that is disposed while a filter runs",
      act: async ({ image, kernel: taps }) => {
        const engine = await createEngine();
        const running = engine.prepare(taps, { width: 6, height: 5 }).runAsync(image);
        engine.dispose();
        return running;
      },
    },
    {
      title: "explain after the engine is disposed",
      act: async ({ kernel: taps }) => {
        const engine = await createEngine();
        engine.dispose();
        return engine.explain(taps, { width: 3, height: 3 });
      },
    },
  ],
  "invalid-profile": [
    { title: "another version", act: () => createEngine({ profile: profile({ version: 7 }) }), says: ["7", "2"] },
    { title: "no coefficients", act: () => createEngine({ profile: profile({ nanoseconds: undefined }) }), says: ["nanoseconds"] },
    { title: "missing coefficients", act: () => createEngine({ profile: profile({}) }) },
    { title: "not an object", act: () => createEngine({ profile: untyped("fast") }) },
    { title: "a list in place of coefficients", act: () => createEngine({ profile: profile({ nanoseconds: [1, 2] }) }), says: ["an array"] },
    { title: "no number of threads", act: () => createEngine({ profile: profile({ threads: undefined }) }), says: ["threads", "1 or more"] },
  ],
  "memory-limit": [
    {
      title: "a limit that no method can meet",
      act: async ({ kernel: taps }) => {
        const engine = await createEngine({ memoryLimit: 2 ** 20 });
        try {
          return engine.prepare(taps, { width: 4, height: 2_000_000, channels: 4, sample: "f32" });
        } finally {
          // The same engine works on for what does fit.
          engine.convolve({ data: Uint8Array.of(1, 2, 3), width: 3, height: 1 }, kernel([[1]]));
          engine.dispose();
        }
      },
      // The limit, less what the engine keeps for itself.
      says: [/1048[0-9]{3}/],
    },
  ],
  "memory-exhausted": [
    {
      title: "the host grants no more memory",
      act: ({ engine, kernel: taps }) => withoutMemory(() => engine.prepare(taps, { width: 4000, height: 4000, channels: 4, sample: "f32" })),
    },
  ],
  "webassembly-missing": [
    { title: "a host without WebAssembly", act: () => withGlobal("WebAssembly", undefined, () => createEngine()), says: ["WebAssembly"] },
  ],
  "webassembly-blocked": [
    { title: "a policy that forbids to compile", act: () => withGlobal("WebAssembly", blockedWebAssembly(), () => createEngine()), says: ["wasm-unsafe-eval"] },
  ],
  "self-test-failed": [
    { title: "a module that multiplies wrongly", act: () => createEngine({ build: "simd", module: brokenCore(vectorDifference) }) },
    { title: "a module that traps", act: () => createEngine({ build: "simd", module: brokenCore(trap) }) },
    { title: "a module that exports nothing", act: () => createEngine({ module: emptyModule() }) },
  ],
  "clock-unusable": [
    {
      title: "a profile by a clock that stands still",
      act: ({ engine }) =>
        profileBy(
          withClock(() => 5),
          engine,
        ),
      says: ["stands still", "performance.now()"],
    },
    { title: "a profile by a clock that runs backwards", act: ({ engine }) => profileBy(withClock(backwards()), engine), says: ["backwards"] },
    {
      title: "a profile by a clock that tells no number",
      act: ({ engine }) =>
        profileBy(
          withClock(() => NaN),
          engine,
        ),
    },
    {
      title: "a crossover by a clock that stands still",
      act: ({ engine }) =>
        crossoverBy(
          withClock(() => 5),
          engine,
          { width: 32, height: 24 },
        ),
      says: ["stands still"],
    },
  ],
};
