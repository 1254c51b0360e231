import { describe, expect, test } from "vitest";
import { checkedLayout, checkedRequest } from "../../src/api/validate/request.js";
import { gaussian, kernel, outer, type Kernel, type PrepareOptions } from "../../src/index.js";
import { problemOf } from "../../src/planning/problem.js";
import { shapeOf } from "../../src/planning/shape.js";

function shape(taps: Kernel, options: PrepareOptions = {}, bytesAvailable = 2 ** 28): string {
  const layout = checkedLayout("test", { width: 640, height: 480, channels: 1, sample: "f32" });
  return shapeOf(problemOf(checkedRequest("test", taps, layout, options), "simd", bytesAvailable));
}

const bell = (sigma: number): Kernel => gaussian({ sigma, radius: 20 });

describe("the shape of a problem", () => {
  test("is the same for other taps of the same size and structure", () => {
    expect(shape(bell(5))).toBe(shape(bell(6.5)));
  });

  test.each<[string, Kernel, PrepareOptions, number | undefined]>([
    ["another size", gaussian({ sigma: 5, radius: 21 }), {}, undefined],
    ["another structure", kernel(Array.from({ length: 41 }, (_, j) => Array.from({ length: 41 }, (_, i) => ((i * 7 + j * 11) % 13) + 1))), {}, undefined],
    ["mostly zeros", outer([1, ...Array<number>(39).fill(0), 1], [1, ...Array<number>(39).fill(0), 1]), {}, undefined],
    ["another border", bell(5), { border: "zero" }, undefined],
    ["a region", bell(5), { region: { x: 0, y: 0, width: 320, height: 480 } }, undefined],
    ["another output", bell(5), { output: { sample: "u8" } }, undefined],
    ["linear light", bell(5), { light: "linear" }, undefined],
    ["memory that leaves the FFT other tiles", bell(5), {}, 2 ** 20],
  ])("differs for %s", (_, taps, options, bytesAvailable) => {
    expect(shape(taps, options, bytesAvailable)).not.toBe(shape(bell(5)));
  });
});
