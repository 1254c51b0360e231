import { expect, test } from "vitest";
import * as field from "../../src/generated/record.js";
import { cores } from "./bench.js";

/**
 * The curve in double precision, by the host's power function.
 * Source   IEC 61966-2-1; W3C, CSS Color Module Level 4, sample code for colour conversions
 */
function decoded(encoded: number): number {
  return encoded <= 0.04045 ? encoded / 12.92 : ((encoded + 0.055) / 1.055) ** 2.4;
}

/** Distance to the next float32 above. */
function ulp(value: number): number {
  const word = new Uint32Array(new Float32Array([value]).buffer);
  word[0]!++;
  return new Float32Array(word.buffer)[0]! - Math.fround(value);
}

function table(core: (typeof cores)[number], full: number): Float32Array {
  core.bench.clear();
  const curve = core.bench.take(4 * (full + 1));
  core.routines.decodeCurve(core.bench.job().integer(field.CURVE, curve).address, 0, full + 1, 0);
  expect(core.bench.damage()).toBeUndefined();
  return core.bench.floats(curve, full + 1);
}

test.each([255, 65535])("decodeCurve: every code of 0 … %i is within one unit of the last place, ascending, the same in both builds", (full) => {
  const [first, ...others] = cores.map((core) => table(core, full));
  for (const other of others) expect(other.every((value, code) => Object.is(value, first![code]))).toBe(true);
  let worst = 0;
  let steps = 0;
  first!.forEach((value, code) => {
    const exact = decoded(Math.fround(code / full));
    if (code > 0) worst = Math.max(worst, Math.abs(value - exact) / ulp(exact));
    if (code > 0 && value > first![code - 1]!) steps++;
  });
  expect(worst).toBeLessThanOrEqual(1);
  expect(steps).toBe(full);
  expect([first![0], first![full]]).toEqual([0, 1]);
});
