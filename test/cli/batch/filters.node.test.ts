import { describe, expect, it } from "vitest";
import { Filters } from "../../../src/cli/batch/filters.js";
import { type Engine, type Layout, createEngine, disk } from "../../../src/index.js";

const layoutOf = (width: number): Required<Layout> => ({ width, height: 64, channels: 1, sample: "f32" });

async function withEngine(memoryLimit: number, use: (engine: Engine) => void): Promise<void> {
  const engine = await createEngine({ memoryLimit });
  try {
    use(engine);
  } finally {
    engine.dispose();
  }
}

describe("filters of a batch", () => {
  it("are prepared once for a layout", () =>
    withEngine(2 ** 26, (engine) => {
      const filters = new Filters(engine, disk(2), {});
      const first = filters.for(layoutOf(10));
      expect(filters.for(layoutOf(10))).toBe(first);
      expect(filters.for(layoutOf(11))).not.toBe(first);
      expect(filters.for({ ...layoutOf(10), channels: 3 })).not.toBe(first);
      expect(filters.for({ ...layoutOf(10), sample: "u16" })).not.toBe(first);
      expect(filters.for(layoutOf(10))).toBe(first);
    }));

  it("are four at most: the one that was used longest ago gives its memory back", () =>
    withEngine(2 ** 26, (engine) => {
      const filters = new Filters(engine, disk(2), {});
      const [first, second] = [filters.for(layoutOf(10)), filters.for(layoutOf(11))];
      for (const width of [12, 13, 10, 14]) filters.for(layoutOf(width));
      expect(() => second.run()).toThrow(expect.objectContaining({ code: "disposed" }));
      expect(filters.for(layoutOf(10))).toBe(first);
    }));

  it("make room for one that needs it", async () => {
    const layout = layoutOf(3000);
    let bytes = 0;
    await withEngine(2 ** 28, (engine) => {
      bytes = engine.explain(disk(9), layout, { method: "fft" }).bytes;
    });
    // Room for one of them and no second one: the FFT could do with less, which costs time, before it would be refused.
    await withEngine(Math.ceil(bytes * 1.2), (engine) => {
      const filters = new Filters(engine, disk(9), { method: "fft" });
      const first = filters.for(layout);
      let width = 3001;
      for (; width < 3004; width++) filters.for(layoutOf(width));
      expect(() => first.run()).toThrow(expect.objectContaining({ code: "disposed" }));
    });
  });

  it("say what is wrong where there is no room for one alone", () =>
    withEngine(65536, (engine) => {
      expect(() => new Filters(engine, disk(99), { method: "direct" }).for(layoutOf(100_000))).toThrow(expect.objectContaining({ code: "memory-limit" }));
    }));
});
