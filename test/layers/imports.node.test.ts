import { describe, expect, test } from "vitest";
import { firstCycle, importsOfTheInside, unknownLayers, wrongImports } from "./rules.js";
import { importsOf, parse, sourcesBelow } from "./sources.js";

const sources = sourcesBelow("src");
const imports = sources.flatMap(importsOf);

function importsIn(path: string, text: string) {
  return importsOf(parse(path, text));
}

describe("imports go one way", () => {
  test("src/ has sources and imports to look at", () => {
    expect(sources.length).toBeGreaterThan(20);
    expect(imports.length).toBeGreaterThan(40);
  });

  test("every layer of src/ has a rule", () => {
    expect(unknownLayers(sources)).toEqual([]);
    expect(unknownLayers([parse("src/attic/old.ts", "")])).toEqual(["attic"]);
  });

  test("no file imports against the direction, and the library imports no package", () => {
    expect(wrongImports(imports)).toEqual([]);
  });

  test("the demo, the benchmarks and the tests of what is computed use the public face", () => {
    const outside = [...sourcesBelow("bench"), ...sourcesBelow("test")].flatMap(importsOf);
    expect(outside.length).toBeGreaterThan(100);
    expect(importsOfTheInside(outside)).toEqual([]);
    expect(importsOfTheInside(importsIn("bench/demo/demo.ts", 'import { methods } from "../../src/planning/methods.js";'))).toHaveLength(1);
  });

  test("no value imports go round in a cycle", () => {
    expect(firstCycle(imports)).toBeUndefined();
  });
});

describe("the rules find what they are for", () => {
  test.each([
    ["src/math/border.ts", 'import { kernel } from "../kernels/kernel.js";'],
    ["src/math/border.ts", 'import { ConvolutionError } from "../errors.js";'],
    ["src/runtime/execute.ts", 'import type { Problem } from "../planning/problem.js";'],
    ["src/planning/direct.ts", 'export { createEngine } from "../api/engine.js";'],
    ["src/kernels/box.ts", 'const late = import("../runtime/memory.js");'],
    ["src/cli/tapwise.ts", 'import { explain } from "../planning/explanation.js";'],
    ["src/errors.ts", 'import type { Samples } from "./types.js";'],
    ["src/api/engine.ts", 'import { readFileSync } from "node:fs";'],
    ["src/types.ts", 'import { makeKernel } from "./kernels/kernel.js";'],
  ])("%s: %s", (path, text) => {
    expect(wrongImports(importsIn(path, text))).toHaveLength(1);
  });

  test("a leaf may name a type of the kernels", () => {
    expect(wrongImports(importsIn("src/types.ts", 'import type { Kernel } from "./kernels/kernel.js";'))).toEqual([]);
  });

  test("a cycle is named, a cycle of types is none", () => {
    const there = importsIn("src/math/a.ts", 'import { b } from "./b.js";');
    expect(firstCycle([...there, ...importsIn("src/math/b.ts", 'import { a } from "./a.js";')])).toBe("src/math/a.ts → src/math/b.ts → src/math/a.ts");
    expect(firstCycle([...there, ...importsIn("src/math/b.ts", 'import type { A } from "./a.js";')])).toBeUndefined();
  });
});
