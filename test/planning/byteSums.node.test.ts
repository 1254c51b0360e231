import { expect, test } from "vitest";
import { byteSums, type ByteSums } from "../../src/planning/byteSums.js";

/** The core's arithmetic (bytes/sums), spelt out. */
function result({ bias, scale, divisor }: ByteSums, sum: number): number {
  const nearest = Math.fround(Math.fround(Math.fround(bias + sum) * scale) + 2 ** 23) - 2 ** 23;
  if (divisor === 0) return nearest;
  return bias + sum - nearest * divisor < 0 ? nearest - 1 : nearest;
}

/** ⌊sum ÷ count + offset + ½⌋ in whole numbers: offsets are multiples of ½. */
const mean = (sum: number, count: number, offset: number): number => Math.floor((2 * sum + 2 * offset * count + count) / (2 * count));

test("every sum of every box up to 400 samples gives the mean, rounded half up", () => {
  for (let count = 1; count <= 400; count++) {
    const rows = count % 2 === 0 ? 2 : 1;
    const found = byteSums(count / rows, rows, 1 / count, 0)!;
    expect(found).toBeDefined();
    for (let sum = 0; sum <= 255 * count; sum++) if (result(found, sum) !== mean(sum, count, 0)) throw new Error(`${count} samples, sum ${sum}`);
  }
});

test.each([
  [101, 101],
  [127, 127],
  [128, 128],
  [129, 129],
  [201, 201],
  [500, 100],
  [3, 2000],
  [2001, 2001],
])("so does a box of %i × %i around all sums where results change, and at 100,000 others", (columns, rows) => {
  const count = columns * rows;
  const found = byteSums(columns, rows, 1 / count, 0)!;
  expect(found.divisor === 0 ? rows <= 128 : found.divisor === count).toBe(true);
  const check = (sum: number): void => {
    if (sum >= 0 && sum <= 255 * count && result(found, sum) !== mean(sum, count, 0)) throw new Error(`sum ${sum}`);
  };
  for (let level = 0; level <= 255; level++) for (let near = -3; near <= 3; near++) check(Math.ceil((level + 0.5) * count) + near);
  for (let k = 0; k <= 100_000; k++) check(Math.floor((k / 100_000) * 255 * count));
});

test("gain and offset are part of it as long as results stay bytes", () => {
  const count = 9;
  for (const [gain, offset] of [
    [0.5, 0],
    [0.5, 100],
    [0.25, 0.5],
  ] as const) {
    const found = byteSums(3, 3, gain / count, offset);
    if (!found) continue;
    for (let sum = 0; sum <= 255 * count; sum++)
      expect(result(found, sum)).toBe(Math.floor(((2 * sum * gain + 2 * offset * count + count) / (2 * count)) * (1 + 1e-15)));
  }
  expect(byteSums(3, 3, 0.5 / count, 100)).toBeDefined();
});

test("there is no way where results could leave 0 … 255, or sums 31 bits", () => {
  expect(byteSums(3, 3, 1.01 / 9, 0)).toBeUndefined();
  expect(byteSums(3, 3, 1 / 9, 1)).toBeUndefined();
  expect(byteSums(3, 3, 1 / 9, -1)).toBeUndefined();
  expect(byteSums(3, 3, -1 / 9, 255)).toBeUndefined();
  expect(byteSums(3, 3, 0, 0)).toBeUndefined();
  expect(byteSums(2920, 2920, 1 / 2920 ** 2, 0)).toBeUndefined();
});
