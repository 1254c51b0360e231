import { describe, expect, test } from "vitest";
import { ConvolutionError, type ErrorCode } from "../../src/errors.js";
import * as kernels from "../../src/kernels/index.js";
import { asKernel } from "../../src/kernels/kernel.js";

/** The package seen by a caller without types. */
const api = kernels as unknown as Record<string, (...given: unknown[]) => kernels.Kernel>;
const { kernel, outer, reversed, scaled, normalised, delta, box, binomial, gaussian, laplacian, laplacianOfGaussian } = api;
const { differenceOfGaussians, sobel, prewitt, scharr, sharpen, unsharp, disk, line } = api;

type Row = readonly [what: string, code: ErrorCode, call: () => unknown, says: RegExp];

const constructors: Row[] = [
  ["no rows", "invalid-kernel", () => kernel!([]), /empty/],
  ["an empty row", "invalid-kernel", () => kernel!([[]]), /Row 0 .* empty/],
  ["an empty second row", "invalid-kernel", () => kernel!([[1], []]), /Row 1 .* empty/],
  ["ragged rows", "invalid-kernel", () => kernel!([[1, 2], [3]]), /Row 1 .* 1 taps, row 0 has 2/],
  [
    "a NaN",
    "invalid-kernel",
    () =>
      kernel!([
        [1, 2],
        [3, Number.NaN],
      ]),
    /column 1, row 1 is NaN/,
  ],
  ["an infinity", "invalid-kernel", () => kernel!([1, -Infinity]), /column 1, row 0 is -Infinity/],
  ["a tap beyond single precision", "invalid-kernel", () => kernel!([3.402823466385289e38]), /single precision/],
  ["texts", "invalid-kernel", () => kernel!(["1", "2"]), /list of numbers/],
  ["rows among numbers", "invalid-kernel", () => kernel!([[1], 2]), /list of numbers/],
  ["big integers", "invalid-kernel", () => kernel!(BigInt64Array.of(1n)), /list of numbers/],
  ["bytes without a type", "invalid-kernel", () => kernel!(new DataView(new ArrayBuffer(8))), /list of numbers/],
  ["null", "invalid-kernel", () => kernel!(null), /found null/],
  ["nothing", "invalid-kernel", () => kernel!(), /found undefined/],
  ["a text", "invalid-kernel", () => kernel!("gaussian"), /found string/],
  ["an origin outside", "invalid-origin", () => kernel!([1, 2], { origin: { x: 2, y: 0 } }), /\(2, 0\).*2×1.*0…1/],
  ["a negative origin", "invalid-origin", () => kernel!([1, 2], { origin: { x: 0, y: -1 } }), /\(0, -1\)/],
  ["an origin between taps", "invalid-origin", () => kernel!([1, 2], { origin: { x: 0.5, y: 0 } }), /\(0\.5, 0\)/],
  ["half an origin", "invalid-origin", () => kernel!([1, 2], { origin: { x: 0 } }), /\(0, undefined\)/],
  ["an origin that is no pair", "invalid-origin", () => kernel!([1, 2], { origin: 1 }), /origin 1/],
  ["an origin that is null", "invalid-origin", () => kernel!([1, 2], { origin: null }), /does not lie/],
  ["an unknown option", "unknown-option", () => kernel!([1], { orign: { x: 0, y: 0 } }), /Did you mean "origin"/],
  ["options that are no object", "unknown-value", () => kernel!([1], 3), /object .* found number/],
  ["outer with an empty column", "invalid-kernel", () => outer!([], [1]), /column of taps is empty/],
  ["outer with an empty row", "invalid-kernel", () => outer!([1], []), /row of taps is empty/],
  ["outer with products beyond single precision", "invalid-kernel", () => outer!([1e30], [1e30]), /single precision/],
  ["outer with too many taps", "invalid-kernel", () => outer!(new Float64Array(8193), new Float64Array(8193)), /67125249 taps; at most 67108864/],
  ["outer with an unknown option", "unknown-option", () => outer!([1], [1], { centre: 1 }), /It takes "origin"/],
  ["reversed of something else", "invalid-kernel", () => reversed!([[1]]), /an array was found/],
  ["reversed of nothing", "invalid-kernel", () => reversed!(null), /null was found/],
  ["a plain object with too few taps", "invalid-kernel", () => asKernel({ width: 2, height: 2, taps: [1, 2, 3] }), /3 taps/],
  ["a plain object without taps", "invalid-kernel", () => asKernel({ width: 2, height: 2, taps: "1" }), /no list of taps/],
  ["a plain object with a fractional side", "invalid-kernel", () => asKernel({ width: 1.5, height: 2, taps: [1, 2, 3] }), /width 1\.5/],
  ["a plain object with a NaN", "invalid-kernel", () => asKernel({ width: 1, height: 1, taps: [Number.NaN] }), /NaN/],
  ["scaled by NaN", "invalid-number", () => scaled!(delta!(), Number.NaN), /factor is NaN/],
  ["scaled out of single precision", "invalid-kernel", () => scaled!(delta!(), 1e39), /single precision/],
  ["normalised taps that cancel", "invalid-kernel", () => normalised!(kernel!([-1, 1])), /sum to 0/],
  ["normalised taps that are all zero", "invalid-kernel", () => normalised!(kernel!([0, 0])), /sum to 0/],
];

const builders: Row[] = [
  ["delta of a negative width", "invalid-number", () => delta!({ width: -1 }), /width is -1/],
  ["delta with a position outside", "invalid-origin", () => delta!({ width: 3, position: { x: 3, y: 0 } }), /\(3, 0\)/],
  ["box without options", "invalid-number", () => box!(), /width is undefined/],
  ["box of width 0", "invalid-number", () => box!(0), /width is 0/],
  ["box of a fractional height", "invalid-number", () => box!({ width: 3, height: 2.5 }), /height is 2\.5/],
  ["box of a text", "invalid-number", () => box!("3"), /width is "3"/],
  ["box with a misspelt option", "unknown-option", () => box!({ widht: 3 }), /Did you mean "width"/],
  ["box of null", "unknown-value", () => box!(null), /found null/],
  ["box of a list", "unknown-value", () => box!([3, 3]), /found an array/],
  ["box that is huge", "invalid-kernel", () => box!(100_000), /at most 67108864/],
  ["box with an origin outside", "invalid-origin", () => box!({ width: 3, origin: { x: 3, y: 0 } }), /\(3, 0\)/],
  ["binomial of a negative order", "invalid-number", () => binomial!(-1), /order is -1/],
  ["binomial of a huge order", "invalid-number", () => binomial!(1001), /0…1000/],
  ["binomial of half an order", "invalid-number", () => binomial!({ order: { x: 1 } }), /order\.y is undefined/],
  ["binomial with a third axis", "unknown-option", () => binomial!({ order: { x: 1, y: 1, z: 1 } }), /no option "z"/],
  ["gaussian of a negative sigma", "invalid-number", () => gaussian!({ sigma: -1 }), /sigma is -1/],
  ["gaussian of sigma NaN", "invalid-number", () => gaussian!(Number.NaN), /sigma is NaN/],
  ["gaussian of a huge sigma", "invalid-number", () => gaussian!(1e9), /0…500/],
  ["gaussian without a sigma", "invalid-number", () => gaussian!({}), /sigma is undefined/],
  ["gaussian of a fractional radius", "invalid-number", () => gaussian!({ sigma: 1, radius: 1.5 }), /radius is 1\.5/],
  ["gaussian of a huge radius", "invalid-number", () => gaussian!({ sigma: 1, radius: 4096 }), /0…4095/],
  ["gaussian of a radius that is null", "invalid-number", () => gaussian!({ sigma: { x: 1, y: null } }), /sigma\.y is null/],
  [
    "gaussian of a sampling that does not exist",
    "unknown-value",
    () => gaussian!({ sigma: 1, sampling: "discrete" }),
    /"discrete" is not known\. Use "point" or "area"/,
  ],
  ["gaussian of a misspelt sampling", "unknown-value", () => gaussian!({ sigma: 1, sampling: "aera" }), /Did you mean "area"/],
  ["gaussian with a misspelt option", "unknown-option", () => gaussian!({ sigma: 1, raduis: 3 }), /Did you mean "radius"/],
  ["laplacian of an unknown stencil", "unknown-value", () => laplacian!("crss"), /Did you mean "cross"/],
  ["laplacian with an unknown option", "unknown-option", () => laplacian!({ kind: "cross" }), /It takes "stencil"/],
  ["laplacianOfGaussian of a tiny sigma", "invalid-number", () => laplacianOfGaussian!(0.1), /0\.3…500/],
  ["laplacianOfGaussian with an unknown option", "unknown-option", () => laplacianOfGaussian!({ sigma: 1, ratio: 2 }), /no option "ratio"/],
  ["differenceOfGaussians of sigma 0", "invalid-number", () => differenceOfGaussians!(0), /above 0/],
  ["differenceOfGaussians of ratio 1", "invalid-number", () => differenceOfGaussians!({ sigma: 1, ratio: 1 }), /above 1/],
  ["differenceOfGaussians of an unknown sampling", "unknown-value", () => differenceOfGaussians!({ sigma: 1, sampling: "discrete" }), /"discrete"/],
  ["differenceOfGaussians that is huge", "invalid-number", () => differenceOfGaussians!({ sigma: 500, ratio: 100 }), /radius is 200000/],
  ["sobel without an axis", "unknown-value", () => sobel!(), /axis undefined is not known\. Use "x" or "y"/],
  ["prewitt of another axis", "unknown-value", () => prewitt!("z"), /axis "z"/],
  ["scharr with a misspelt option", "unknown-option", () => scharr!({ axes: "x" }), /Did you mean "axis"/],
  ["sharpen by a negative amount", "invalid-number", () => sharpen!(-1), /amount is -1/],
  ["sharpen with an unknown stencil", "unknown-value", () => sharpen!({ stencil: 3 }), /stencil 3/],
  ["unsharp by infinity", "invalid-number", () => unsharp!({ sigma: 1, amount: Infinity }), /amount is Infinity/],
  ["unsharp with a misspelt option", "unknown-option", () => unsharp!({ sigma: 1, amout: 1 }), /Did you mean "amount"/],
  ["unsharp of null", "unknown-value", () => unsharp!(null), /found null/],
  ["disk of radius 0", "invalid-number", () => disk!(0), /above 0/],
  ["disk of an unknown sampling", "unknown-value", () => disk!({ radius: 1, sampling: "areas" }), /Did you mean "area"/],
  ["line of length 0", "invalid-number", () => line!(0), /above 0/],
  ["line at no angle", "invalid-number", () => line!({ length: 3, angleInDegrees: Infinity }), /angleInDegrees is Infinity/],
  ["line with an angle in an unknown unit", "unknown-option", () => line!({ length: 3, angle: 30 }), /Did you mean "angleInDegrees"/],
];

describe.each([...constructors, ...builders])("%s", (_, code, call, says) => {
  test(`is refused as ${code}, and says what to do`, () => {
    let thrown: unknown;
    try {
      call();
    } catch (error) {
      thrown = error;
    }
    expect(thrown).toBeInstanceOf(ConvolutionError);
    const error = thrown as ConvolutionError;
    expect(error.code).toBe(code);
    expect(error.fault).toBe("caller");
    expect(error.message).toMatch(says);
    expect(error.expected).toBeDefined();
  });
});
