import { ConvolutionError } from "../../errors.js";
import { asKernel, readTaps, type Kernel } from "../../kernels/kernel.js";
import { checkedNumber, checkOptionNames, chosenWord } from "../../kernels/options.js";
import { analyse } from "../../planning/analysis.js";
import { methodNames } from "../../planning/methods.js";
import { anchorOf, extentOf, type Request } from "../../planning/problem.js";
import type { Alpha, BorderRule, Channels, Extent, Light, Method, Region, SampleType } from "../../types.js";
import { checkedBorder } from "./border.js";
import { checkedChannels, checkedSide } from "./raster.js";

const sampleNames = ["u8", "u16", "f32"] as const satisfies SampleType[];
const extents = ["same", "full", "valid"] as const satisfies Extent[];
const methodChoices: (Method | "auto")[] = ["auto", ...methodNames];
const alphas = ["straight", "premultiplied", "keep", "none"] as const satisfies Alpha[];
const lights = ["encoded", "linear"] as const satisfies Light[];
const optionNames = ["border", "extent", "method", "tolerance", "region", "alpha", "light", "output"];

const largestFloat = 3.4028234663852886e38;
const finite = { what: "a finite number that single precision can hold", least: -largestFloat, most: largestFloat };

/** The image's shape, every field there. */
export interface ImageShape {
  width: number;
  height: number;
  channels: Channels;
  sample: SampleType;
}

/** @throws ConvolutionError `invalid-raster`, `unknown-value`, `unknown-option` */
export function checkedLayout(where: string, layout: unknown): ImageShape {
  checkOptionNames(`${where}: layout`, layout, ["width", "height", "channels", "sample"]);
  const { width, height, channels = 1, sample = "u8" } = layout as Partial<Record<keyof ImageShape, unknown>>;
  return {
    width: checkedSide(`${where}: layout`, "width", width),
    height: checkedSide(`${where}: layout`, "height", height),
    channels: checkedChannels(`${where}: layout`, channels),
    sample: chosenWord(where, "sample", sample, sampleNames),
  };
}

/** Taps that sum to nothing but rounding. */
function isSumless(kernel: Kernel): boolean {
  const { sum, absoluteSum } = analyse(kernel);
  return Math.abs(sum) <= 1e-9 * absoluteSum;
}

/**
 * Colours that are averaged by how much there is of them need taps with a sum to divide by.
 */
function checkedAlpha(where: string, given: unknown, channels: number, kernel: Kernel): Alpha {
  const sumless = isSumless(kernel);
  const hasAlpha = channels === 2 || channels === 4;
  if (given === undefined) return !hasAlpha ? "none" : sumless ? "keep" : "straight";
  const alpha = chosenWord(where, "alpha", given, alphas);
  if (alpha !== "none" && !hasAlpha) {
    const message = `${where}: alpha "${alpha}" needs an alpha channel, the image has ${channels} ${channels === 1 ? "channel" : "channels"}. Use "none", or an image of 2 or 4 channels.`;
    throw new ConvolutionError("alpha-not-applicable", message, { expected: "none", received: alpha });
  }
  refuseSumless(where, alpha, kernel);
  return alpha;
}

function refuseRenormalised(where: string, rules: BorderRule[], kernel: Kernel): void {
  if (!rules.includes("renormalised")) return;
  const { negative, sum } = analyse(kernel);
  if (!negative && sum > 0) return;
  const found = negative ? `a negative tap (${readTaps(kernel).reduce((least, tap) => Math.min(least, tap))})` : `taps that sum to ${sum}`;
  const message = `${where}: border "renormalised" divides by the weight that falls inside, and the kernel has ${found}. Use "replicate" or a symmetric border.`;
  throw new ConvolutionError("border-not-applicable", message, { expected: "no negative tap, a positive sum", received: found });
}

/** @throws ConvolutionError `alpha-not-applicable` */
function refuseSumless(where: string, alpha: Alpha, kernel: Kernel): void {
  if (alpha !== "straight" || !isSumless(kernel)) return;
  const message = `${where}: alpha "straight" divides by the sum of the taps, which is ${kernel.sum}. Use "keep" (alpha stays as it is) or "none".`;
  throw new ConvolutionError("alpha-not-applicable", message, { expected: ["keep", "premultiplied", "none"], received: alpha });
}

/**
 * A kernel to take the place of a filter's own: of the same size and origin, and with taps that the filter's border and alpha allow.
 *
 * @throws ConvolutionError `invalid-kernel`, `kernel-mismatch`, `border-not-applicable`, `alpha-not-applicable`
 */
export function checkedReplacement(where: string, given: unknown, { kernel: before, rows, columns, alpha }: Request): Kernel {
  const kernel = asKernel(given);
  const shapeOf = ({ width, height, origin }: Kernel): string => `${width}×${height} with origin (${origin.x}, ${origin.y})`;
  const [expected, received] = [shapeOf(before), shapeOf(kernel)];
  if (expected !== received) {
    const message = `${where}: the kernel is ${received}, the filter was prepared for ${expected}. Give one of that size and origin, or prepare a filter for this one.`;
    throw new ConvolutionError("kernel-mismatch", message, { expected, received });
  }
  refuseRenormalised(where, [rows, columns], kernel);
  refuseSumless(where, alpha, kernel);
  return kernel;
}

/** The whole output of an extent, as a region. */
function wholeOutput(where: string, extent: Extent, shape: ImageShape, kernel: Kernel, correlate: boolean): Region {
  const side = (samples: number, taps: number, origin: number): number => extentOf(extent, samples, taps, anchorOf(taps, origin, !correlate)).count;
  const width = side(shape.width, kernel.width, kernel.origin.x);
  const height = side(shape.height, kernel.height, kernel.origin.y);
  if (width > 0 && height > 0) return { x: 0, y: 0, width, height };
  const sizes = `Kernel ${kernel.width}×${kernel.height} does not fit into image ${shape.width}×${shape.height}`;
  const message = `${where}: ${sizes}: extent "valid" would have no samples. Use extent "same", or a kernel of at most ${shape.width}×${shape.height}.`;
  throw new ConvolutionError("empty-result", message, {
    expected: `a kernel of at most ${shape.width}×${shape.height}`,
    received: `${kernel.width}×${kernel.height}`,
  });
}

function checkedRegion(where: string, region: unknown, whole: Region): Region {
  if (region === undefined) return whole;
  checkOptionNames(`${where}: region`, region, ["x", "y", "width", "height"]);
  const { x, y, width, height } = region as Region;
  const integers = [x, y, width, height].every((value) => Number.isSafeInteger(value));
  if (integers && x >= 0 && y >= 0 && width > 0 && height > 0 && x + width <= whole.width && y + height <= whole.height) return { x, y, width, height };
  const found = `x ${String(x)}, y ${String(y)}, ${String(width)}×${String(height)}`;
  const message = `${where}: region ${found} does not lie inside the output, which is ${whole.width}×${whole.height}. Use whole numbers with x + width ≤ ${whole.width}, y + height ≤ ${whole.height}.`;
  throw new ConvolutionError("invalid-region", message, { expected: `inside ${whole.width}×${whole.height}`, received: found });
}

function checkedOutput(where: string, given: unknown, sample: SampleType): Request["output"] {
  if (given === undefined) return { sample, gain: 1, offset: 0 };
  checkOptionNames(`${where}: output`, given, ["sample", "gain", "offset"]);
  const output = given as Partial<Record<"sample" | "gain" | "offset", unknown>>;
  return {
    sample: output.sample === undefined ? sample : chosenWord(where, "output.sample", output.sample, sampleNames),
    gain: output.gain === undefined ? 1 : checkedNumber(where, "output.gain", output.gain, finite),
    offset: output.offset === undefined ? 0 : checkedNumber(where, "output.offset", output.offset, finite),
  };
}

const wordOr = <W extends string>(where: string, name: string, value: unknown, words: readonly W[], otherwise: W): W =>
  value === undefined ? otherwise : chosenWord(where, name, value, words);

function checkedFlag(where: string, name: string, flag: unknown): boolean {
  if (flag === undefined || typeof flag === "boolean") return flag === true;
  const message = `${where}: ${name} is ${String(flag)}. It must be true or false.`;
  throw new ConvolutionError("unknown-value", message, { expected: [true, false], received: flag });
}

/**
 * Checks a kernel and options against an image's shape, and fills every default in.
 *
 * @param where the call that messages name: "convolve", "prepare"
 * @param correlate what the call says of the taps; nothing where it is an option
 * @throws ConvolutionError with fault "caller"
 */
export function checkedRequest(where: string, kernelGiven: unknown, shape: ImageShape, given: unknown, correlate?: boolean): Request {
  const kernel = asKernel(kernelGiven);
  const names = correlate === undefined ? [...optionNames, "correlate", "measure"] : optionNames;
  if (given !== undefined) checkOptionNames(where, given, names);
  const options = (given ?? {}) as Record<string, unknown>;
  const reversedNot = correlate ?? checkedFlag(where, "correlate", options["correlate"]);
  const extent = wordOr(where, "extent", options["extent"], extents, "same");
  if (extent === "valid" && options["border"] !== undefined) {
    const message = `${where}: extent "valid" never reads outside the image, so a border has no use. Leave border out, or use extent "same" or "full".`;
    throw new ConvolutionError("border-without-use", message, { expected: "no border", received: options["border"] });
  }
  const border = checkedBorder(options["border"], { where, channels: shape.channels, sample: shape.sample });
  refuseRenormalised(where, [border.rows, border.columns], kernel);
  const output = checkedOutput(where, options["output"], shape.sample);
  const tolerance = options["tolerance"];
  return {
    kernel,
    correlate: reversedNot,
    ...shape,
    ...border,
    extent,
    region: checkedRegion(where, options["region"], wholeOutput(where, extent, shape, kernel, reversedNot)),
    measure: checkedFlag(where, "measure", options["measure"]),
    method: wordOr(where, "method", options["method"], methodChoices, "auto"),
    tolerance:
      tolerance === undefined
        ? output.sample === "u8"
          ? 1 / 16
          : 0
        : checkedNumber(where, "tolerance", tolerance, { what: "a number of levels, 0 or more", least: 0 }),
    alpha: checkedAlpha(where, options["alpha"], shape.channels, kernel),
    light: wordOr(where, "light", options["light"], lights, "encoded"),
    output,
  };
}
