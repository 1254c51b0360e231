import fc from "fast-check";
import { expect, test } from "vitest";
import { checkedLayout, checkedRequest } from "../../src/api/validate/request.js";
import { kernel, type Border } from "../../src/index.js";
import { problemOf } from "../../src/planning/problem.js";
import { smallestWeight, weightsOf } from "../../src/planning/weights.js";

const borders: Border[] = ["renormalised", { rows: "renormalised", columns: "zero" }, { rows: "replicate", columns: "renormalised" }];
const side = fc.integer({ min: 1, max: 9 });
const taps = fc.oneof(fc.constant(0), fc.integer({ min: 1, max: 9 }), fc.constantFrom(1e-6, 1e-28));

test("the smallest weight is that of the whole table, whatever the taps, origin, image, border, extent and region", () => {
  const problems = fc.record({
    width: side,
    height: side,
    rows: fc.array(fc.array(taps, { minLength: 9, maxLength: 9 }), { minLength: 1, maxLength: 9 }),
    columns: side,
    origin: fc.record({ x: fc.nat(8), y: fc.nat(8) }),
    border: fc.constantFrom(...borders),
    extent: fc.constantFrom("same" as const, "full" as const),
    correlate: fc.boolean(),
  });
  fc.assert(
    fc.property(problems, ({ width, height, rows, columns, origin, border, extent, correlate }) => {
      const cut = rows.map((row) => row.slice(0, columns));
      fc.pre(cut.some((row) => row.some((tap) => tap > 0)));
      const made = kernel(cut, { origin: { x: origin.x % columns, y: origin.y % cut.length } });
      const layout = checkedLayout("test", { width, height, channels: 1, sample: "f32" });
      const problem = problemOf(checkedRequest("test", made, layout, { border, extent, correlate }), "simd", 2 ** 28);
      const [found, inTable] = [smallestWeight(problem), weightsOf(problem).smallest];
      if (inTable === Infinity) expect(found).toBe(Infinity);
      else expect(found / inTable).toBeCloseTo(1, 12);
    }),
    { numRuns: 3000 },
  );
});
