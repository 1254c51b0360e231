import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { delta, kernel, type Kernel, normalised, outer, reversed, scaled } from "../../src/kernels/index.js";
import { asKernel, readTaps } from "../../src/kernels/kernel.js";
import { resultAt, rowsOf } from "./resultAt.js";

const tap = fc.double({ min: -1e6, max: 1e6, noNaN: true });

/** Any kernel up to 6×6, with any origin. */
const anyKernel: fc.Arbitrary<Kernel> = fc
  .tuple(fc.integer({ min: 1, max: 6 }), fc.integer({ min: 1, max: 6 }))
  .chain(([width, height]) =>
    fc.record({
      rows: fc.array(fc.array(tap, { minLength: width, maxLength: width }), { minLength: height, maxLength: height }),
      x: fc.nat(width - 1),
      y: fc.nat(height - 1),
    }),
  )
  .map(({ rows, x, y }) => kernel(rows, { origin: { x, y } }));

describe("kernel", () => {
  test("keeps rows as they are written", () => {
    const made = kernel([
      [1, 2, 3],
      [4, 5, 6],
    ]);
    expect(made).toMatchObject({ width: 3, height: 2, origin: { x: 1, y: 0 }, sum: 21 });
    expect(Array.from(made.taps)).toEqual([1, 2, 3, 4, 5, 6]);
  });

  test("takes a flat list as one row, and typed arrays as lists", () => {
    expect(kernel([1, 2, 3, 4])).toMatchObject({ width: 4, height: 1, origin: { x: 1, y: 0 }, sum: 10 });
    expect(rowsOf(kernel(Float32Array.of(0.5, 1)))).toEqual([[0.5, 1]]);
    expect(rowsOf(kernel([Uint8Array.of(1, 2), [3, 4]]))).toEqual([
      [1, 2],
      [3, 4],
    ]);
  });

  test("puts the origin at ⌊(count − 1) / 2⌋", () => {
    for (const [count, middle] of [
      [1, 0],
      [2, 0],
      [3, 1],
      [4, 1],
      [5, 2],
      [6, 2],
    ] as const) {
      expect(kernel(new Array<number>(count).fill(1)).origin).toEqual({ x: middle, y: 0 });
      expect(kernel(Array.from({ length: count }, () => [1])).origin).toEqual({ x: 0, y: middle });
    }
  });

  test("makes zeros of negative zeros", () => {
    expect(Object.is(kernel([-0]).taps[0], 0)).toBe(true);
    expect(Object.is(scaled(kernel([0, 1]), -1).taps[0], 0)).toBe(true);
  });

  test("keeps taps at the end of single precision and denormal ones", () => {
    const taps = [3.4028234663852886e38, -3.4028234663852886e38, 5e-324];
    expect(Array.from(kernel(taps).taps)).toEqual(taps);
  });

  test("sums without losing small taps among large ones", () => {
    expect(kernel([1e20, 1, -1e20]).sum).toBe(1);
  });
});

describe("a kernel is a value", () => {
  test("whose taps are a fresh copy at each read", () => {
    const made = kernel([1, 2, 3]);
    made.taps[1] = 100;
    expect(Array.from(made.taps)).toEqual([1, 2, 3]);
    expect(made.taps).not.toBe(made.taps);
  });

  test("that does not follow the arrays it was made from", () => {
    const row = [1, 2, 3];
    const typed = Float64Array.of(1, 2);
    const origin = { x: 2, y: 0 };
    const made = kernel([row], { origin });
    const fromTyped = kernel(typed);
    row[0] = 9;
    typed[0] = 9;
    origin.x = 0;
    expect(Array.from(made.taps)).toEqual([1, 2, 3]);
    expect(Array.from(fromTyped.taps)).toEqual([1, 2]);
    expect(made.origin.x).toBe(2);
  });

  test("that cannot be changed", () => {
    const made = kernel([1, 2, 3]) as { width: number; origin: { x: number }; sum: number };
    expect(() => (made.width = 7)).toThrow(TypeError);
    expect(() => (made.sum = 7)).toThrow(TypeError);
    expect(() => (made.origin.x = 0)).toThrow(TypeError);
  });

  test("that prints", () => {
    expect(String(kernel([[1, 2, 1]]))).toBe("kernel 3×1, origin (1, 0), sum 4");
  });

  test("that survives JSON", () => {
    fc.assert(
      fc.property(anyKernel, (made) => {
        const read = asKernel(JSON.parse(JSON.stringify(made)));
        expect(read.toString()).toBe(made.toString());
        expect(read.taps).toEqual(made.taps);
      }),
    );
  });

  test("that is read without a copy inside the package", () => {
    const made = kernel([1, 2]);
    expect(readTaps(made)).toBe(readTaps(made));
    const plain = { width: 2, height: 1, origin: { x: 0, y: 0 }, taps: Float64Array.of(1, 2), sum: 3 };
    expect(readTaps(plain)).toBe(plain.taps);
    expect(asKernel(made)).toBe(made);
    expect(asKernel(plain).toString()).toBe(made.toString());
  });
});

describe("outer", () => {
  test("runs the first list down and the second along", () => {
    expect(rowsOf(outer([1, 2], [3, 4, 5]))).toEqual([
      [3, 4, 5],
      [6, 8, 10],
    ]);
    expect(outer([1, 2], [3, 4, 5], { origin: { x: 2, y: 1 } }).origin).toEqual({ x: 2, y: 1 });
  });
});

describe("reversed", () => {
  test("turns taps and origin by 180°", () => {
    const turned = reversed(
      kernel(
        [
          [1, 2, 3],
          [4, 5, 6],
        ],
        { origin: { x: 0, y: 0 } },
      ),
    );
    expect(rowsOf(turned)).toEqual([
      [6, 5, 4],
      [3, 2, 1],
    ]);
    expect(turned.origin).toEqual({ x: 2, y: 1 });
  });

  test("twice is the kernel itself", () => {
    fc.assert(
      fc.property(anyKernel, (made) => {
        const twice = reversed(reversed(made));
        expect(twice.taps).toEqual(made.taps);
        expect(twice.origin).toEqual(made.origin);
      }),
    );
  });

  test("makes a convolution of a correlation", () => {
    // z(0, 0) = Σ h[j, i] · I(i − ox, j − oy), the definition of correlation; whole numbers, so exact.
    const made = kernel(
      [
        [1, 2, 3],
        [4, 5, 6],
      ],
      { origin: { x: 2, y: 0 } },
    );
    const image = (x: number, y: number): number => 7 * x * x + 3 * y + x * y;
    let correlation = 0;
    rowsOf(made).forEach((row, j) => row.forEach((h, i) => (correlation += h * image(i - made.origin.x, j - made.origin.y))));
    expect(resultAt(reversed(made), image)).toBe(correlation);
  });
});

describe("scaled", () => {
  test("multiplies every tap and keeps the origin", () => {
    const made = scaled(kernel([1, -2, 3], { origin: { x: 2, y: 0 } }), -0.5);
    expect(Array.from(made.taps)).toEqual([-0.5, 1, -1.5]);
    expect(made.origin).toEqual({ x: 2, y: 0 });
  });
});

describe("normalised", () => {
  test("gives non-negative taps the sum 1 within 1 ulp", () => {
    const positive = fc.array(fc.double({ min: 1e-3, max: 1e3, noNaN: true }), { minLength: 1, maxLength: 60 });
    fc.assert(fc.property(positive, (taps) => Math.abs(normalised(kernel(taps)).sum - 1) <= 2 ** -52));
  });

  test("turns the sign where the sum is negative, and keeps the origin", () => {
    const made = normalised(kernel([-1, -3], { origin: { x: 1, y: 0 } }));
    expect(Array.from(made.taps)).toEqual([0.25, 0.75]);
    expect(made.origin.x).toBe(1);
  });

  test("leaves equal taps equal", () => {
    expect(new Set(normalised(kernel(new Array<number>(49).fill(3))).taps).size).toBe(1);
  });
});

describe("delta", () => {
  test("is a 1 at the origin", () => {
    expect(rowsOf(delta())).toEqual([[1]]);
    expect(rowsOf(delta({ width: 3, height: 2, origin: { x: 2, y: 1 } }))).toEqual([
      [0, 0, 0],
      [0, 0, 1],
    ]);
  });

  test("shifts to the right and down by position − origin", () => {
    const ramp = (x: number, y: number): number => x + 100 * y;
    expect(resultAt(delta({ width: 5, position: { x: 4, y: 3 } }), ramp, 10, 10)).toBe(ramp(8, 9));
  });
});
