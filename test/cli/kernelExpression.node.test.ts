import { describe, expect, it } from "vitest";
import { builders } from "../../src/cli/builders.js";
import { readKernelExpression } from "../../src/cli/kernelExpression.js";
import { type Kernel, binomial, box, delta, gaussian, kernel, line, sharpen, sobel } from "../../src/index.js";
import * as library from "../../src/index.js";

function shapeOf({ width, height, origin, taps }: Kernel): object {
  return { width, height, origin: { x: origin.x, y: origin.y }, taps: [...taps] };
}

function expectSame(text: string, wanted: Kernel): void {
  expect(shapeOf(readKernelExpression(text))).toEqual(shapeOf(wanted));
}

describe("a builder expression", () => {
  it.each<[string, Kernel]>([
    ["gaussian 3", gaussian({ sigma: 3 })],
    ["  gaussian   1.5  ", gaussian({ sigma: 1.5 })],
    ["gaussian 2,1", gaussian({ sigma: { x: 2, y: 1 } })],
    ["gaussian sigma=2 sampling=area", gaussian({ sigma: 2, sampling: "area" })],
    ["gaussian 2 sampling = area", gaussian({ sigma: 2, sampling: "area" })],
    ["gaussian 5/2 6", gaussian({ sigma: 2.5, radius: 6 })],
    ["box 9", box(9)],
    ["box 9 1", box({ width: 9, height: 1 })],
    ["box height=3 width=5", box({ width: 5, height: 3 })],
    ["box 3 origin=0,2", box({ width: 3, origin: { x: 0, y: 2 } })],
    ["binomial 4, 0", binomial({ order: { x: 4, y: 0 } })],
    ["sobel x", sobel("x")],
    ["sobel axis=y", sobel("y")],
    ["line 15 30", line({ length: 15, angleInDegrees: 30 })],
    ["delta", delta()],
    ["delta 5 position=4,2", delta({ width: 5, position: { x: 4, y: 2 } })],
    ["sharpen 0.8", sharpen({ amount: 0.8 })],
    ["sharpen", sharpen()],
  ])('"%s" is what the builder makes of it', (text, wanted) => expectSame(text, wanted));

  it("exists for every builder of the library", () => {
    const makers = ["kernel", "outer", "reversed", "scaled", "normalised", "kernelFromRaster", "createEngine", "ConvolutionError"];
    const functions = Object.entries(library).filter(([name, value]) => typeof value === "function" && !makers.includes(name));
    expect(Object.keys(builders).sort()).toEqual(functions.map(([name]) => name).sort());
  });

  it.each(Object.entries(builders))("%s takes the parameters that the help lists", (_, { parameters, required, build }) => {
    const values: Record<string, number | string> = { axis: "x", stencil: "square", sampling: "point", ratio: 2, position: "", width: 3, height: 3 };
    const given = parameters.filter((name) => name !== "position");
    const options = Object.fromEntries(given.map((name) => [name, values[name] ?? 4]));
    expect(build(options).taps.length).toBeGreaterThan(0);
    const least = Object.fromEntries(given.slice(0, required).map((name) => [name, values[name] ?? 4]));
    expect(build(least).taps.length).toBeGreaterThan(0);
  });

  it.each([
    ["gausian 3", "usage", 'no builder "gausian"'],
    ["constructor", "usage", "no builder"],
    ["gaussian", "usage", "sigma is missing"],
    ["gaussian 3 9 point 4", "usage", '"4" is one value too many'],
    ["gaussian 3 sigma=4", "usage", "sigma is given twice"],
    ["gaussian sigma=3 9", "usage", "without a name"],
    ["gaussian three", "invalid-number", "three"],
    ["gaussian -1", "invalid-number", "-1"],
    ["box 3 hight=2", "unknown-option", "height"],
    ["sobel z", "unknown-value", "z"],
  ])('"%s" is refused with %s', (text, code, words) => {
    expect(() => readKernelExpression(text)).toThrowError(expect.objectContaining({ code, fault: "caller", message: expect.stringContaining(words) }));
  });
});

describe("taps written out", () => {
  it.each<[string, Kernel]>([
    [
      "1 2 1; 2 4 2; 1 2 1",
      kernel([
        [1, 2, 1],
        [2, 4, 2],
        [1, 2, 1],
      ]),
    ],
    ["1 2 1; 2 4 2; 1 2 1 /16", binomial(2)],
    ["1,2,1;2,4,2;1,2,1/16", binomial(2)],
    ["1 2 1\t;2 4 2; 1 2 1; / 16", binomial(2)],
    ["-1 0 +1", kernel([[-1, 0, 1]])],
    ["1; .5; 2.5e-1", kernel([[1], [0.5], [0.25]])],
    ["7", kernel([[7]])],
    ["1 1 / -2", kernel([[-0.5, -0.5]])],
  ])('"%s"', (text, wanted) => expectSame(text, wanted));

  it.each([
    ["", "usage", "a tap is missing"],
    ["1 2;; 3 4", "usage", "a tap is missing"],
    ["1 2 x", "usage", '"x" is not a number'],
    ["1 0x10", "usage", '"0x10"'],
    ["1 Infinity", "usage", '"Infinity"'],
    ["1 2 /0", "usage", "divisor"],
    ["1/9 1/9 1/9", "usage", "divisor at the end"],
    ["1 2 1; 2 4", "invalid-kernel", "2 taps"],
  ])('"%s" is refused with %s', (text, code, words) => {
    expect(() => readKernelExpression(text)).toThrowError(expect.objectContaining({ code, fault: "caller", message: expect.stringContaining(words) }));
  });
});
