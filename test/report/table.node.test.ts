import { describe, expect, test } from "vitest";
import { crossoverTable, textTable } from "../../src/report/table.js";
import { sampleCrossover } from "./samples.js";

const crossover = sampleCrossover({ methods: ["direct", "fft"], untimedFrom: { direct: 45 } });

describe("the table says what was measured", () => {
  test("one row a size, by size, whatever the order of the rows", () => {
    const { rows } = crossoverTable({ ...crossover, rows: crossover.rows.toReversed() });
    expect(rows.map(({ size }) => size)).toEqual(crossover.rows.map(({ size }) => `${size}×${size}`));
  });

  test("every figure is that of the data to three digits", () => {
    const { methods, rows } = crossoverTable(crossover);
    expect(methods).toEqual(["direct", "fft"]);
    let compared = 0;
    for (const [index, row] of crossover.rows.entries())
      for (const [column, method] of methods.entries()) {
        const cell = rows[index]!.times[column]!;
        for (const [text, value] of [
          [cell.measured, row.milliseconds[method]],
          [cell.predicted, row.predicted[method]],
        ] as const) {
          if (value === undefined) expect(text).toBe("");
          else {
            // Half a unit of the third digit, which is at most a hundredth of the number.
            expect(Math.abs(Number(text) / value - 1)).toBeLessThanOrEqual(0.005);
            compared++;
          }
        }
      }
    expect(compared).toBe(13 * 4 - 4);
  });

  test("regret is in per cent", () => {
    const rows = crossover.rows.slice(0, 3).map((row, k) => ({ ...row, regret: [0, 0.0345, 0.256][k]! }));
    const told = crossoverTable({ ...crossover, rows }).rows;
    expect(told.map(({ regret }) => regret)).toEqual(["0 %", "3.5 %", "26 %"]);
    expect(told.map(({ costs }) => costs)).toEqual([false, true, true]);
  });

  test("the middle half of the times has two ends, and is not told of a method that was timed once", () => {
    const row = { ...crossover.rows[0]!, quartiles: { direct: [1.234, 5.678] as [number, number], fft: [2.5, 2.5] as [number, number] } };
    const [direct, fft] = crossoverTable({ ...crossover, rows: [row] }).rows[0]!.times;
    expect(direct?.middleHalf).toBe("1.23 … 5.68");
    expect(fft?.middleHalf).toBe("");
  });

  test("there is none without rows", () => {
    expect(crossoverTable({ ...crossover, rows: [] })).toEqual({ methods: [], rows: [] });
  });
});

describe("the table for a terminal", () => {
  test("its columns stand under their headings", () => {
    const lines = textTable(crossover).split("\n");
    expect(lines).toHaveLength(2 + crossover.rows.length);
    const [above, headings, ...body] = lines;
    const right = headings!.indexOf("measured") + "measured".length;
    expect(above!.indexOf("direct, ms")).toBe(headings!.indexOf("measured"));
    expect(above!.indexOf("FFT, ms")).toBe(headings!.lastIndexOf("measured"));
    for (const line of body) expect(line.slice(right - 1, right + 1)).toMatch(/^[\d–] $/);
  });

  test("what was not timed is a dash", () => {
    const last = textTable(crossover).split("\n").at(-1)!;
    expect(last).toMatch(/^127×127 +– +\d+ +\d+\.\d +\d+\.\d +FFT +FFT +0 %$/);
  });
});
