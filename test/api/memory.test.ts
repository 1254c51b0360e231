import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { createEngine, type Engine } from "../../src/index.js";
import { EngineMemory } from "../../src/runtime/memory.js";
import { applicable } from "../support/answers.js";
import { kernelsOfEveryKind } from "../support/kernels.js";
import { noise, noiseImage } from "../support/noise.js";
import { layoutOf } from "../support/questions.js";

const pageBytes = 65536;
const image = noiseImage("u8", 150, 120, 4, 2);
const layout = layoutOf(image);

/** Memories that engines made while recording. */
const recorded: WebAssembly.Memory[] = [];
const { Memory } = WebAssembly;

beforeEach(() => {
  recorded.length = 0;
  WebAssembly.Memory = class extends Memory {
    constructor(descriptor: WebAssembly.MemoryDescriptor) {
      super(descriptor);
      recorded.push(this);
    }
  };
});
afterEach(() => {
  WebAssembly.Memory = Memory;
});

/** An engine and the memory that it computes in: the last one made, after that of its known-answer test. */
async function engineWithMemory(): Promise<{ engine: Engine; memory: WebAssembly.Memory }> {
  const engine = await createEngine();
  const memory = recorded.at(-1)!;
  return { engine, memory };
}

describe.each(kernelsOfEveryKind)("%s", (_, kernel) => {
  const methods = applicable("simd", { image, kernel }).map(({ method }) => method);

  test.each(methods)("%s: a thousand runs into a target leave pages and views as they were", async (method) => {
    const small = noiseImage("u8", 20, 12, 4, 3);
    const { engine, memory } = await engineWithMemory();
    const filter = engine.prepare(kernel, layoutOf(small), { method });
    const target = { data: new Uint8Array(small.data.length), width: 20, height: 12, channels: 4 as const };
    const { buffer } = memory;
    filter.run(small, target);
    for (let times = 0; times < 1000; times++) filter.run(small, target);
    expect(memory.buffer).toBe(buffer);
    engine.dispose();
  });

  test.each(methods)("%s: explain tells the bytes that the filter takes, and takes none itself", async (method) => {
    const { engine, memory } = await engineWithMemory();
    const before = memory.buffer.byteLength;
    const { bytes } = engine.explain(kernel, layout, { method });
    expect(memory.buffer.byteLength).toBe(before);
    const filter = engine.prepare(kernel, layout, { method });
    expect(filter.explanation.bytes).toBe(bytes);
    // Until the memory has to grow, filters lie in what the known-answer test took.
    while (memory.buffer.byteLength === before) engine.prepare(kernel, layout, { method });
    const taken = memory.buffer.byteLength;
    for (let more = 0; more < 8; more++) engine.prepare(kernel, layout, { method });
    expect(Math.abs(memory.buffer.byteLength - taken - 8 * bytes)).toBeLessThanOrEqual(pageBytes);
    const grown = memory.buffer;
    filter.run(image);
    expect(memory.buffer).toBe(grown);
    engine.dispose();
  });

  test.each(methods)("%s: what dispose gives back is used again", async (method) => {
    const { engine, memory } = await engineWithMemory();
    engine.prepare(kernel, layout, { method }).dispose();
    const taken = memory.buffer.byteLength;
    for (let times = 0; times < 20; times++) {
      const filter = engine.prepare(kernel, layout, { method });
      filter.run(image);
      filter.dispose();
      filter.dispose();
      engine.convolve(image, kernel, { method });
    }
    expect(memory.buffer.byteLength).toBe(taken);
    engine.dispose();
  });
});

/** Blocks taken and given back in random order never overlap, are cleared, and become one again. */
test("the memory hands out cleared blocks that do not overlap", () => {
  const limit = 64 * pageBytes;
  const memory = new EngineMemory(limit);
  const next = noise(9);
  const held: { address: number; byteLength: number }[] = [];
  for (let times = 0; times < 600; times++) {
    if (held.length > 12 || (held.length > 0 && next() < 0.4)) {
      const [block] = held.splice(Math.floor(next() * held.length), 1);
      memory.release(block!.address, block!.byteLength);
      continue;
    }
    const byteLength = 64 * (1 + Math.floor(next() * 3000));
    const block = { address: memory.take(byteLength), byteLength };
    for (const other of held) expect(block.address + byteLength <= other.address || other.address + other.byteLength <= block.address).toBe(true);
    const bytes = new Uint8Array(memory.memory.buffer, block.address, byteLength);
    expect(bytes.every((byte) => byte === 0)).toBe(true);
    bytes.fill(255);
    held.push(block);
  }
  for (const { address, byteLength } of held) memory.release(address, byteLength);
  const all = memory.largestBlock;
  expect(all).toBeGreaterThan(limit - pageBytes);
  expect(() => memory.take(all + 64)).toThrow(/memoryLimit/);
  expect(memory.take(all)).toBeGreaterThan(0);
});
