import { ConvolutionError, shown } from "../../errors.js";
import type { Channels, Raster, Samples, SampleType } from "../../types.js";

/** The longest side of an image: index maps stay small, and indices exact. */
const longestSide = 16_777_216;

/** A raster whose every field is there and right. */
export interface CheckedRaster {
  readonly data: Samples;
  readonly sample: SampleType;
  readonly width: number;
  readonly height: number;
  readonly channels: Channels;
  readonly stride: number;
  readonly colorSpace: string | undefined;
}

type Given = Partial<Record<keyof Raster, unknown>>;

/** What passed, and what it said of itself where that may differ from what was filled in. */
interface Accepted {
  channels: unknown;
  stride: unknown;
  /** Samples that the array had: none as soon as it is detached, others if its buffer was resized. */
  length: number;
  checked: CheckedRaster;
}

/** The last raster of each array that passed: the same again, in whatever object, has nothing new to be checked, and costs no memory. */
const accepted = new WeakMap<Samples, Accepted>();

function acceptedBefore({ data, width, height, channels, stride, colorSpace }: Given): CheckedRaster | undefined {
  const known = accepted.get(data as Samples);
  if (known === undefined || (data as Samples).length !== known.length || channels !== known.channels || stride !== known.stride) return undefined;
  const { checked } = known;
  const colours = typeof colorSpace === "string" ? colorSpace : undefined;
  return width === checked.width && height === checked.height && colours === checked.colorSpace ? checked : undefined;
}

const sampleOfArray: Record<string, SampleType> = { Uint8Array: "u8", Uint8ClampedArray: "u8", Uint16Array: "u16", Float32Array: "f32" };

function fail(what: string, found: string, needed: string, advice: string): never {
  throw new ConvolutionError("invalid-raster", `${what}: ${found}. Needed: ${needed}. ${advice}`, { expected: needed, received: found });
}

/** The array's own name, also for arrays of another realm: a page's frames, a test's sandbox. */
function arrayName(data: unknown): string {
  if (Array.isArray(data)) return "a plain array";
  if (typeof data !== "object" || data === null) return data === null ? "null" : typeof data;
  return Object.prototype.toString.call(data).slice(8, -1);
}

function isDetached(data: ArrayBufferView): boolean {
  const { buffer } = data as { buffer: ArrayBufferLike & { detached?: boolean } };
  if (buffer.detached !== undefined) return buffer.detached;
  try {
    return buffer.byteLength === 0 && new Uint8Array(buffer).length > 0;
  } catch {
    return true;
  }
}

/**
 * The samples of a raster and their type.
 *
 * @throws ConvolutionError `unsupported-samples`, `detached-samples`
 */
function checkedSamples(what: string, data: unknown): { data: Samples; sample: SampleType } {
  const name = arrayName(data);
  const sample = ArrayBuffer.isView(data) && Object.hasOwn(sampleOfArray, name) ? sampleOfArray[name] : undefined;
  if (sample === undefined) {
    const expected = Object.keys(sampleOfArray);
    const advice =
      name === "Float16Array"
        ? "Half floats are not taken yet: pass Float32Array.from(image.data), or ask the canvas for 8-bit data."
        : "Copy the samples into one of these.";
    const message = `${what}: data is ${name}. Needed: ${expected.join(", ")}. ${advice}`;
    throw new ConvolutionError("unsupported-samples", message, { expected, received: name });
  }
  const samples = data as Samples;
  if (samples.length === 0 && isDetached(samples)) {
    const message = `${what}: the ${name}'s buffer is detached (it was transferred elsewhere), so there are no samples. Pass a copy, or take the array back first.`;
    throw new ConvolutionError("detached-samples", message, { expected: "an attached buffer", received: "a detached buffer" });
  }
  return { data: samples, sample };
}

/** @throws ConvolutionError `invalid-raster` */
export function checkedSide(what: string, name: string, value: unknown): number {
  if (Number.isInteger(value) && (value as number) >= 1 && (value as number) <= longestSide) return value as number;
  return fail(what, `${name} is ${shown(value)}`, `a whole number 1…${longestSide}`, `Give ${name} in samples.`);
}

export function checkedChannels(what: string, value: unknown): Channels {
  if (value === 1 || value === 2 || value === 3 || value === 4) return value;
  return fail(what, `channels is ${shown(value)}`, "1, 2, 3 or 4", "Give the samples of one pixel.");
}

function channelsFromLength(what: string, length: number, width: number, height: number): Channels {
  const channels = length / (width * height);
  if (channels === 1 || channels === 2 || channels === 3 || channels === 4) return channels;
  return fail(
    what,
    `data has ${length} samples for ${width}×${height} pixels, ${Number(channels.toPrecision(4))} a pixel`,
    `${width * height} samples times 1, 2, 3 or 4`,
    "Check width and height, or give channels (and stride where rows are padded).",
  );
}

function checkedStride(what: string, value: unknown, rowSamples: number): number {
  if (value === undefined) return rowSamples;
  if (Number.isSafeInteger(value) && (value as number) >= rowSamples) return value as number;
  return fail(what, `stride is ${shown(value)}`, `a whole number of at least width · channels = ${rowSamples}`, "Give stride in samples.");
}

/**
 * Checks a raster and fills in what it leaves out.
 *
 * @param where the call that messages name: "convolve", "run"
 * @param name how messages call the raster: "image", "target"
 * @throws ConvolutionError `invalid-raster`, `unsupported-samples`, `detached-samples`
 */
export function checkedRaster(where: string, name: string, raster: unknown): CheckedRaster {
  if (typeof raster === "object" && raster !== null) return acceptedBefore(raster) ?? checkedAnew(`${where}: ${name}`, raster);
  const found = raster === null ? "null" : typeof raster;
  return fail(`${where}: ${name}`, `it is ${found}`, "{ data, width, height }", "Pass an ImageData, a decoded PNG or a plain object.");
}

/** Reads each field once, so that what is remembered is what was checked. */
function checkedAnew(what: string, raster: Given): CheckedRaster {
  const { width: widthGiven, height: heightGiven, channels: channelsGiven, stride: strideGiven, colorSpace: colours } = raster;
  const width = checkedSide(what, "width", widthGiven);
  const height = checkedSide(what, "height", heightGiven);
  const { data, sample } = checkedSamples(what, raster.data);
  const channels = channelsGiven === undefined ? channelsFromLength(what, data.length, width, height) : checkedChannels(what, channelsGiven);
  const stride = checkedStride(what, strideGiven, width * channels);
  const needed = (height - 1) * stride + width * channels;
  const loose = strideGiven !== undefined;
  if (data.length < needed || (data.length > needed && !loose)) {
    const rows = loose ? `, rows ${stride} samples apart` : "";
    const advice = "Check width, height and channels, or give stride where rows are padded.";
    fail(what, `data has ${data.length} samples`, `${needed} for ${width}×${height}×${channels}${rows}`, advice);
  }
  const checked: CheckedRaster = { data, sample, width, height, channels, stride, colorSpace: typeof colours === "string" ? colours : undefined };
  accepted.set(data, { channels: channelsGiven, stride: strideGiven, length: data.length, checked });
  return checked;
}
