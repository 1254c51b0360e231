import { expect, test } from "vitest";
import { inner } from "./debugCore.js";

/** Source   IEC 61966-2-1; W3C, CSS Color Module Level 4, sample code for colour conversions */
const decoded = (encoded: number): number => (encoded <= 0.04045 ? encoded / 12.92 : ((encoded + 0.055) / 1.055) ** 2.4);
const encoded = (linear: number): number => (linear <= 0.0031308 ? 12.92 * linear : 1.055 * linear ** (1 / 2.4) - 0.055);

const word = new Uint32Array(1);
const float = new Float32Array(word.buffer);

/** The float32 whose bits are this integer. */
function floatOf(bits: number): number {
  word[0] = bits;
  return float[0]!;
}

function bitsOf(value: number): number {
  float[0] = value;
  return word[0]!;
}

/** Floats all over the positive range up to 2³⁰, an odd stride of bits apart, and every one near the two knees. */
const everywhere = Array.from({ length: 40_000 }, (_, k) => floatOf(k * 32_749)).filter((x) => x < 2 ** 30);
const near = (knee: number): number[] => Array.from({ length: 200 }, (_, k) => floatOf(bitsOf(knee) - 100 + k));
const inputs = [...everywhere, ...near(0.04045), ...near(0.0031308), ...near(1), 0.5, 1, 2, 100];

test.each([
  { name: "decode", exact: decoded },
  { name: "encode", exact: encoded },
] as const)("$name is within one unit of the last place of single precision wherever its value is a normal number, and odd", ({ name, exact }) => {
  let worst = 0;
  for (const x of inputs) {
    const found = inner[name](x);
    const expected = exact(x);
    if (inner[name](-x) !== -found) throw new Error(`${name} is not odd at ${x}`);
    if (expected < 2 ** -126) continue;
    worst = Math.max(worst, Math.abs(found - expected) / (floatOf(bitsOf(expected) + 1) - Math.fround(expected)));
  }
  expect(worst).toBeLessThanOrEqual(1);
});

/** The standard's two pieces of encoding do not quite meet: at the knee the power lies 3·10⁻⁸ below the straight line, for both of us. */
test.each([
  { name: "decode", knee: 0.04045 },
  { name: "encode", knee: 0.0031308 },
] as const)("$name never falls on either side of its knee", ({ name, knee }) => {
  const ascending = inputs.toSorted((a, b) => a - b);
  for (const piece of [ascending.filter((x) => x <= knee), ascending.filter((x) => x > knee)]) {
    expect(piece.length).toBeGreaterThan(1000);
    let before = -1;
    for (const x of piece) {
      const value = inner[name](x);
      if (value < before) throw new Error(`${name} falls at ${x}`);
      before = value;
    }
  }
});

test("the ends are exact, and what is no number stays none", () => {
  for (const name of ["decode", "encode"] as const) {
    expect([inner[name](0), inner[name](1), inner[name](-1)]).toEqual([0, 1, -1]);
    expect([inner[name](Infinity), inner[name](-Infinity), inner[name](NaN)]).toEqual([Infinity, -Infinity, NaN]);
  }
});

test.each([255, 65535])("every code of 0 … %i comes back through decode and encode", (full) => {
  let lost = 0;
  for (let code = 0; code <= full; code++) if (Math.floor(inner.encode(inner.decode(code / full)) * full + 0.5) !== code) lost++;
  expect(lost).toBe(0);
});
