import { describe, expect, test } from "vitest";
import { ConvolutionError, type ErrorCode } from "../../src/errors.js";
import { gaussian, kernelFromRaster, type KernelFromRasterOptions, scaled } from "../../src/kernels/index.js";
import type { Raster } from "../../src/types.js";

const spot = { data: Uint8Array.of(10, 10, 10, 10, 50, 30, 10, 10, 10), width: 3, height: 3 };

describe("kernelFromRaster", () => {
  test("takes the background away, finds the centre and divides by the sum", () => {
    const made = kernelFromRaster(spot, { background: 10 });
    expect(made).toMatchObject({ width: 3, height: 3, origin: { x: 1, y: 1 }, sum: 1 });
    expect(Array.from(made.taps)).toEqual([0, 0, 0, 0, 40 / 60, 20 / 60, 0, 0, 0]);
  });

  test("keeps the samples as they are where asked", () => {
    expect(Array.from(kernelFromRaster(spot, { normalise: false }).taps)).toEqual(Array.from(spot.data));
  });

  test("keeps what lies below the background negative", () => {
    expect(kernelFromRaster(spot, { background: 20, normalise: false, centre: { x: 2, y: 1 } })).toMatchObject({ origin: { x: 2, y: 1 }, sum: -30 });
  });

  test("puts the origin on the sample nearest to the centre of gravity", () => {
    const data = new Float32Array(7 * 5);
    data[1 * 7 + 4] = 1;
    data[1 * 7 + 5] = 3;
    expect(kernelFromRaster({ data, width: 7, height: 5 }).origin).toEqual({ x: 5, y: 1 });
  });

  test.each([
    [1, [6]],
    [2, [6, 99]],
    [3, [3, 6, 9]],
    [4, [3, 6, 9, 99]],
  ] as const)("with %i channels it takes the mean of the colours and leaves alpha out", (channels, pixel) => {
    const data = Uint16Array.from([...pixel, ...pixel.map((value) => 2 * value)]);
    expect(Array.from(kernelFromRaster({ data, width: 2, height: 1, channels }, { normalise: false }).taps)).toEqual([6, 12]);
    expect(Array.from(kernelFromRaster({ data, width: 2, height: 1 }, { normalise: false }).taps)).toEqual([6, 12]);
  });

  test("follows the stride and reads nothing between the rows", () => {
    const data = Float32Array.of(1, 2, Number.NaN, Number.NaN, 3, 4);
    expect(Array.from(kernelFromRaster({ data, width: 2, height: 2, channels: 1, stride: 4 }, { normalise: false }).taps)).toEqual([1, 2, 3, 4]);
  });

  test("gives back the kernel whose picture it is shown", () => {
    const { width, height, taps } = gaussian(1.5);
    const made = kernelFromRaster({ data: Float32Array.from(taps), width, height });
    // Each tap was rounded to single precision; the sum of the rounded ones is within 2⁻²⁴ of 1.
    made.taps.forEach((tap, k) => expect(Math.abs(tap - taps[k]!)).toBeLessThanOrEqual(2 ** -23 * taps[k]!));
    expect(made.origin).toEqual({ x: 6, y: 6 });
    expect(scaled(made, 2).origin).toEqual(made.origin);
  });
});

const float64 = { data: new Float64Array(9), width: 3, height: 3 } as unknown as Raster;
const detached = (): Raster => {
  const data = new Uint8Array(9);
  structuredClone(data.buffer, { transfer: [data.buffer] });
  return { data, width: 3, height: 3 };
};

const refused: readonly [what: string, code: ErrorCode, raster: () => unknown, options?: unknown][] = [
  ["nothing", "invalid-raster", () => undefined],
  ["null", "invalid-raster", () => null],
  ["a number", "invalid-raster", () => 3],
  ["doubles", "unsupported-samples", () => float64],
  ["a plain array", "unsupported-samples", () => ({ data: [1, 2, 3], width: 3, height: 1 })],
  ["a detached buffer", "detached-samples", detached],
  ["width 0", "invalid-raster", () => ({ ...spot, width: 0 })],
  ["a fractional height", "invalid-raster", () => ({ ...spot, height: 1.5 })],
  ["a NaN width", "invalid-raster", () => ({ ...spot, width: Number.NaN })],
  ["a huge width", "invalid-kernel", () => ({ ...spot, width: 1e9, channels: 1 })],
  ["too many channels", "invalid-raster", () => ({ ...spot, width: 1, height: 1 })],
  ["a fractional number of channels", "invalid-raster", () => ({ ...spot, width: 2 })],
  ["a short stride", "invalid-raster", () => ({ ...spot, channels: 1, stride: 2 })],
  ["too few samples", "invalid-raster", () => ({ ...spot, height: 4, channels: 1 })],
  ["a NaN sample", "invalid-raster", () => ({ data: Float32Array.of(1, Number.NaN), width: 2, height: 1 })],
  ["darkness", "invalid-raster", () => ({ data: new Uint8Array(9), width: 3, height: 3 })],
  ["darkness around a given centre", "invalid-raster", () => spot, { background: 255, centre: { x: 1, y: 1 } }],
  ["a background that is no number", "invalid-number", () => spot, { background: "10" }],
  ["a centre outside", "invalid-origin", () => spot, { centre: { x: 3, y: 0 } }],
  ["a centre between samples", "invalid-origin", () => spot, { centre: { x: 0.5, y: 0 } }],
  ["a normalise that is no boolean", "unknown-value", () => spot, { normalise: "yes" }],
  ["a normalise that is text", "unknown-value", () => spot, { normalise: "false" }],
  ["an unknown option", "unknown-option", () => spot, { center: { x: 1, y: 1 } }],
  ["options that are null", "unknown-value", () => spot, null],
];

describe.each(refused)("an image with %s", (_, code, raster, options) => {
  test(`is refused as ${code}`, () => {
    let thrown: unknown;
    try {
      kernelFromRaster(raster() as Raster, options as KernelFromRasterOptions);
    } catch (error) {
      thrown = error;
    }
    expect(thrown).toBeInstanceOf(ConvolutionError);
    expect((thrown as ConvolutionError).code).toBe(code);
  });
});
