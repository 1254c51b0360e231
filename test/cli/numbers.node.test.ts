import { describe, expect, it } from "vitest";
import { borderOf, borderRule } from "../../src/cli/border.js";
import { byteCount, readNumber, wholeNumbers } from "../../src/cli/numbers.js";
import { asJson, asMilliseconds } from "../../src/cli/report.js";

const usage = expect.objectContaining({ code: "usage" });

describe("a number", () => {
  it.each([
    ["3", 3],
    ["-0.5", -0.5],
    ["+.25", 0.25],
    ["1e-3", 0.001],
    ["1/257", 1 / 257],
    [" 3 / -4 ", -0.75],
  ])('"%s"', (text, value) => expect(readNumber(text)).toBe(value));

  it.each(["", "x", "1/0", "1/2/3", "0x10", "Infinity", "NaN", "1e999", "1_000", "١"])('is not "%s"', (text) => expect(readNumber(text)).toBeUndefined());
});

describe("whole numbers", () => {
  it.each(["640x480", "640×480", "640,480", " 640 480 ", "640 , 480"])('"%s"', (text) => expect(wholeNumbers(text, 2, "--size", "")).toEqual([640, 480]));

  it.each(["640", "640x480x3", "640.5x480", "640x", "wide"])('are not "%s"', (text) =>
    expect(() => wholeNumbers(text, 2, "--size", "two")).toThrowError(usage),
  );
});

describe("an amount of memory", () => {
  it.each([
    ["1", 1],
    ["65536", 65536],
    ["64KiB", 65536],
    ["1.5 MiB", 1572864],
    ["2gib", 2147483648],
    ["3MB", 3000000],
  ])('"%s"', (text, bytes) => expect(byteCount(text, "--memory-limit")).toBe(bytes));

  it.each(["", "0", "-1", "64 pages", "MiB", "0.5"])('is not "%s"', (text) => expect(() => byteCount(text, "--memory-limit")).toThrowError(usage));
});

describe("a border", () => {
  it.each<[string, ReturnType<typeof borderRule>]>([
    ["periodic", "periodic"],
    [" whole-sample-symmetric ", "whole-sample-symmetric"],
    ["constant 128", { constant: 128 }],
    ["constant=0.5", { constant: 0.5 }],
    ["constant 255,0, 10,255", { constant: [255, 0, 10, 255] }],
  ])('"%s"', (text, rule) => expect(borderRule(text, "--border")).toEqual(rule));

  it.each(["", "Replicate", "zero 3", "constant", "constant red", "128"])('is not "%s"', (text) =>
    expect(() => borderRule(text, "--border")).toThrowError(usage),
  );

  it("is one rule, or one for each axis where an axis has its own", () => {
    expect(borderOf({})).toBeUndefined();
    expect(borderOf({ border: "zero" })).toBe("zero");
    expect(borderOf({ borderRows: "zero" })).toEqual({ rows: "zero" });
    expect(borderOf({ border: "periodic", borderRows: "zero" })).toEqual({ rows: "zero", columns: "periodic" });
    expect(borderOf({ border: "periodic", borderColumns: "zero" })).toEqual({ rows: "periodic", columns: "zero" });
  });
});

it("JSON has words for numbers that it lacks", () => {
  expect(JSON.parse(asJson({ received: Number.NaN, expected: [Infinity, 1] }))).toEqual({ received: "NaN", expected: ["Infinity", 1] });
});

it.each([
  [0.012345, "0.0123 ms"],
  [12.345, "12.3 ms"],
  [1234.5, "1235 ms"],
  [99.99, "100 ms"],
])("%d milliseconds read %s", (value, text) => expect(asMilliseconds(value)).toBe(text));
