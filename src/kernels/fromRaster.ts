import { ConvolutionError } from "../errors.js";
import type { Raster } from "../types.js";
import { normalised } from "./derive.js";
import { allowedTapCount } from "./fromTaps.js";
import { type Kernel, type Origin, makeKernel } from "./kernel.js";
import { checkOptionNames, checkedNumber } from "./options.js";

export interface KernelFromRasterOptions {
  /** Taken from every sample, in the image's own units: the level where there is no light. @defaultValue 0 */
  background?: number | undefined;
  /** The sample that becomes the origin. @defaultValue the one nearest to the centre of gravity */
  centre?: Origin | undefined;
  /** Divide by the sum, so that the kernel keeps the brightness of an image. @defaultValue `true` */
  normalise?: boolean | undefined;
}

const sampleArrays = ["Uint8Array", "Uint8ClampedArray", "Uint16Array", "Float32Array"];

/**
 * A kernel from an image of a point of light: a measured point spread function.
 *
 *     taps[y, x] = (grey[y, x] − background) / Σ (grey − background)
 *
 * `grey` is the mean of the colour channels; alpha is left out. What lies below the background stays negative, so that
 * noise keeps its mean. `convolve` with the kernel blurs an image as the point was blurred.
 *
 * @param raster any sample type, 1–4 channels, any stride; it is only read
 * @throws ConvolutionError `invalid-raster` (shape; samples not finite; no light above the background where the centre or the sum is needed),
 *         `unsupported-samples`, `detached-samples`, `invalid-number` (background), `invalid-origin` (centre outside), `invalid-kernel` (too many samples),
 *         `unknown-value`, `unknown-option`
 * @example
 * const pinhole = { data: Uint8Array.of(10, 10, 10, 10, 50, 30, 10, 10, 10), width: 3, height: 3 };
 * kernelFromRaster(pinhole, { background: 10 }).taps; // [0, 0, 0, 0, 0.6667, 0.3333, 0, 0, 0]
 */
export function kernelFromRaster(raster: Raster, options: KernelFromRasterOptions = {}): Kernel {
  checkOptionNames("kernelFromRaster", options, ["background", "centre", "normalise"]);
  const background = checkedNumber("kernelFromRaster", "background", options.background ?? 0, { what: "a finite number" });
  const normalise = chosenBoolean(options.normalise);
  const { width, height, taps } = greySamples(raster, background);
  const origin = options.centre ?? nearestToCentroid(taps, width);
  const measured = makeKernel(width, height, taps, origin);
  if (!normalise) return measured;
  return measured.sum > 0 ? normalised(measured) : refuseDark(measured.sum);
}

function chosenBoolean(value: unknown = true): boolean {
  if (typeof value === "boolean") return value;
  const message = `kernelFromRaster: normalise is ${JSON.stringify(value)}. Use true or false.`;
  throw new ConvolutionError("unknown-value", message, { expected: [true, false], received: value });
}

function greySamples(raster: Raster, background: number): { width: number; height: number; taps: Float64Array<ArrayBuffer> } {
  const { data, width, height, channels, stride } = checkedShape(raster);
  const colours = channels === 2 || channels === 4 ? channels - 1 : channels;
  const taps = new Float64Array(width * height);
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      let sum = 0;
      for (let c = 0; c < colours; c++) sum += data[y * stride + x * channels + c]!;
      if (!Number.isFinite(sum)) refuse(`The sample at column ${x}, row ${y} is not finite. Repair the image first.`, "finite samples", sum);
      taps[y * width + x] = sum / colours - background;
    }
  }
  return { width, height, taps };
}

function checkedShape(raster: Raster): Required<Omit<Raster, "colorSpace" | "channels">> & { channels: number } {
  if (typeof raster !== "object" || raster === null) refuse(`An image { data, width, height } was needed, ${String(raster)} was found.`, "a raster", raster);
  const { data, width, height } = raster;
  const kind = Object.prototype.toString.call(data).slice(8, -1);
  if (!sampleArrays.includes(kind)) {
    const message = `Samples in ${kind} are not supported. Use ${sampleArrays.join(", ")}.`;
    throw new ConvolutionError("unsupported-samples", message, { expected: sampleArrays, received: kind });
  }
  if (isDetached(data)) {
    const message = "The image's buffer is detached: it was transferred elsewhere. Hand over a copy instead.";
    throw new ConvolutionError("detached-samples", message, { expected: "an attached buffer", received: "detached" });
  }
  for (const [name, side] of [
    ["width", width],
    ["height", height],
  ] as const) {
    if (!Number.isInteger(side) || side <= 0)
      refuse(`The image's ${name} is ${String(side)}. It must be a positive whole number.`, "a positive whole number", side);
  }
  allowedTapCount(width, height);
  const channels = raster.channels ?? data.length / (width * height);
  if (![1, 2, 3, 4].includes(channels)) {
    refuse(`The image has ${String(channels)} channels (${data.length} samples, ${width}×${height}). Give 1, 2, 3 or 4.`, "1, 2, 3 or 4 channels", channels);
  }
  const stride = raster.stride ?? width * channels;
  if (!Number.isInteger(stride) || stride < width * channels) {
    refuse(`The image's stride is ${String(stride)} samples; a row has ${width * channels}.`, `a whole number of at least ${width * channels}`, stride);
  }
  const needed = (height - 1) * stride + width * channels;
  if (data.length < needed) {
    refuse(`The image holds ${data.length} samples; ${width}×${height}, ${channels} channels and stride ${stride} need ${needed}.`, needed, data.length);
  }
  return { data, width, height, channels, stride };
}

/** A transferred buffer leaves an empty array behind, and no new view of it can be made. */
function isDetached(data: Raster["data"]): boolean {
  if (data.length > 0) return false;
  try {
    return new Uint8Array(data.buffer).length < 0;
  } catch {
    return true;
  }
}

/** The sample nearest to (Σ x · tap / Σ tap, Σ y · tap / Σ tap), within the image. */
function nearestToCentroid(taps: Float64Array, width: number): Origin {
  let weight = 0;
  let momentX = 0;
  let momentY = 0;
  for (let k = 0; k < taps.length; k++) {
    weight += taps[k]!;
    momentX += taps[k]! * (k % width);
    momentY += taps[k]! * Math.floor(k / width);
  }
  if (!(weight > 0)) refuseDark(weight);
  const clamped = (moment: number, count: number): number => Math.min(count - 1, Math.max(0, Math.floor(moment / weight + 0.5)));
  return { x: clamped(momentX, width), y: clamped(momentY, taps.length / width) };
}

function refuseDark(sum: number): never {
  const message = `The image less its background sums to ${sum}: there is no light to take a kernel from. Lower the background, or give a centre and normalise: false.`;
  return refuse(message, "a sum above 0", sum);
}

function refuse(message: string, expected: unknown, received: unknown): never {
  throw new ConvolutionError("invalid-raster", message, { expected, received });
}
