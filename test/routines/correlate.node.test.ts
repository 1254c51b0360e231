import { expect, test } from "vitest";
import { gamma } from "../../src/math/rounding.js";
import { noise } from "../support/noise.js";
import { bench, forms, inner } from "./debugCore.js";

interface Case {
  n: number;
  m: number;
  channels: number;
  count: number;
  integers: boolean;
}

/** Signed numbers: multiples of 2⁻²³ below 1, or whole ones small enough for every sum to be exact. */
function numbers(count: number, seed: number, integers: boolean): Float32Array {
  const next = noise(seed);
  next();
  return Float32Array.from({ length: count }, () => (integers ? Math.floor(201 * next()) - 100 : 2 * next() - 1));
}

/** Rows and taps in memory; the pointer table names the rows in an order of its own, as a ring does. */
function laid({ n, m, channels, count, integers }: Case) {
  bench.clear();
  const rows = Array.from({ length: n + 1 }, (_, j) => numbers(count + (m - 1) * channels, 31 * j + count + m, integers));
  const taps = numbers(n * m, 7 * n + m, integers);
  const addresses = new Int32Array(n + 1);
  for (let j = n; j >= 0; j--) addresses[(j + 1) % (n + 1)] = bench.place(rows[(j + 1) % (n + 1)]!);
  return { rows, taps, table: bench.place(addresses), tapsAddress: bench.place(taps), out: [bench.take(4 * count), bench.take(4 * count)] as const };
}

/** Σ_j Σ_i taps[j, i] · rows[k + j][x + i · channels], in double. */
function defined({ n, m, channels, count }: Case, rows: readonly Float32Array[], taps: Float32Array, k: number): number[] {
  return Array.from({ length: count }, (_, x) => {
    let sum = 0;
    for (let j = 0; j < n; j++) for (let i = 0; i < m; i++) sum += taps[j * m + i]! * rows[k + j]![x + i * channels]!;
    return sum;
  });
}

function expectWithin(found: Float32Array, expected: readonly number[], bound: number): void {
  const worst = expected.reduce((most, value, x) => Math.max(most, Math.abs(found[x]! - value)), 0);
  expect(worst).toBeLessThanOrEqual(bound);
  expect(found.some(Number.isNaN)).toBe(false);
}

const absolute = (values: Float32Array): number => values.reduce((sum, value) => sum + Math.abs(value), 0);
const largest = (rows: readonly Float32Array[]): number => Math.max(...rows.flatMap((row) => Array.from(row, Math.abs)));

const shapes = [
  [1, 1],
  [1, 5],
  [1, 12],
  [2, 1],
  [3, 3],
  [4, 2],
  [5, 7],
].flatMap(([n, m]) => [1, 2, 3, 4].map((channels) => ({ n: n!, m: m!, channels })));
const counts = Array.from({ length: 10 }, (_, k) => 4 * k + 4);

test.each(shapes)("correlateRows: $n × $m taps, $channels channels apart, is its sum within γ(m·n), and both forms agree to the bit", (shape) => {
  for (const count of counts) {
    for (const integers of [true, false]) {
      const stated = { ...shape, count, integers };
      const { n, m, channels } = shape;
      const results = forms.map(({ wide }) => {
        const { rows, taps, table, tapsAddress, out } = laid(stated);
        inner.correlateRows(wide, out[0], out[1], table, tapsAddress, n, m, 4 * channels, count);
        const bound = integers ? 0 : gamma(m * n) * absolute(taps) * largest(rows);
        const found = out.map((address) => bench.floats(address, count));
        found.forEach((row, k) => expectWithin(row, defined(stated, rows, taps, k), bound));
        expect(bench.damage()).toBeUndefined();
        return found;
      });
      expect(results[0]).toEqual(results[1]);
    }
  }
});

test.each(shapes.filter(({ n }) => n === 1))(
  "correlateRow: $m taps, $channels channels apart, is its sum within γ(m), and both forms agree to the bit",
  (shape) => {
    for (const count of counts) {
      for (const integers of [true, false]) {
        const stated = { ...shape, count, integers };
        const { m, channels } = shape;
        const results = forms.map(({ wide }) => {
          const { rows, taps, table, tapsAddress, out } = laid(stated);
          inner.correlateRow(wide, out[0], bench.view(Int32Array, table, 1)[0]!, tapsAddress, m, 4 * channels, count);
          const found = bench.floats(out[0], count);
          expectWithin(found, defined(stated, rows, taps, 0), integers ? 0 : gamma(m) * absolute(taps) * largest(rows));
          expect(bench.damage()).toBeUndefined();
          return found;
        });
        expect(results[0]).toEqual(results[1]);
      }
    }
  },
);

test.each([1, 2, 3, 4, 7, 31])("correlateColumns: %i taps, alone and on top of a term before, is its sum within γ(n + 1)", (n) => {
  for (const count of counts) {
    for (const integers of [true, false]) {
      for (const accumulate of [false, true]) {
        const stated = { n, m: 1, channels: 1, count, integers };
        const results = forms.map(({ wide }) => {
          const { rows, taps, table, tapsAddress, out } = laid(stated);
          const base = numbers(count, 99, integers);
          for (const address of out) bench.view(Float32Array, address, count).set(base);
          inner.correlateColumns(wide, out[0], out[1], table, tapsAddress, n, count, accumulate);
          const bound = integers ? 0 : gamma(n + 1) * (absolute(taps) * largest(rows) + 1);
          const found = out.map((address) => bench.floats(address, count));
          found.forEach((row, k) => {
            const expected = defined(stated, rows, taps, k).map((sum, x) => sum + (accumulate ? base[x]! : 0));
            expectWithin(row, expected, bound);
          });
          expect(bench.damage()).toBeUndefined();
          return found;
        });
        expect(results[0]).toEqual(results[1]);
      }
    }
  }
});

test.each(forms)("$form: a NaN in row n stays out of the upper result, one in row 0 out of the lower, even under a tap of 0", ({ wide }) => {
  for (const count of [4, 16, 20, 36]) {
    const stated = { n: 3, m: 3, channels: 1, count, integers: true };
    for (const [row, reached] of [
      [3, 1],
      [0, 0],
    ] as const) {
      const { table, tapsAddress, out } = laid(stated);
      bench.view(Float32Array, tapsAddress, 9).fill(0);
      bench.view(Float32Array, bench.view(Int32Array, table, 4)[row]!, count + 2).fill(NaN);
      inner.correlateRows(wide, out[0], out[1], table, tapsAddress, 3, 3, 4, count);
      expect(bench.floats(out[reached], count).every(Number.isNaN)).toBe(true);
      expect(bench.floats(out[(1 - reached) as 0 | 1], count).every((value) => value === 0)).toBe(true);
      inner.correlateColumns(wide, out[0], out[1], table, tapsAddress, 3, count, false);
      expect(bench.floats(out[reached], count).every(Number.isNaN)).toBe(true);
      expect(bench.floats(out[(1 - reached) as 0 | 1], count).every((value) => value === 0)).toBe(true);
    }
  }
});
