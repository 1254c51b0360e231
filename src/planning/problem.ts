import { readTaps, type Kernel } from "../kernels/kernel.js";
import { indexMap, type IndexRule } from "../math/borders.js";
import type { Alpha, BorderRule, Build, Channels, Extent, Light, Method, Region, SampleType } from "../types.js";
import { analyse, type KernelAnalysis } from "./analysis.js";
import { sampleFacts } from "./samples.js";
import { keptFloats } from "./tiny.js";

/** A caller's wish, checked and complete: every default filled in. */
export interface Request {
  kernel: Kernel;
  correlate: boolean;
  width: number;
  height: number;
  channels: Channels;
  sample: SampleType;
  rows: BorderRule;
  columns: BorderRule;
  extent: Extent;
  /** The part of the output that is wanted, inside it. */
  region: Region;
  method: Method | "auto";
  /** Time the candidates before deciding. */
  measure?: boolean;
  /** A form of the method by its word, for tests and benchmarks; callers cannot ask for one. */
  variant?: string;
  tolerance: number;
  alpha: Alpha;
  light: Light;
  output: { sample: SampleType; gain: number; offset: number };
}

/** One axis: which samples the results read. */
export interface Axis {
  rule: BorderRule;
  /** Results. */
  count: number;
  /** Taps. */
  taps: number;
  /** Image index of the first sample that is read. */
  first: number;
  /** Samples that are read, in and outside the image: count + taps − 1. */
  extended: number;
  /** Where tap 0 lies relative to the result, in correlation order: result k reads extended samples k … k + taps − 1, itself at k + anchor. */
  anchor: number;
  /** Source index of each extended sample, −1 where a constant stands. */
  map: Int32Array<ArrayBuffer>;
}

/**
 * The one form of every question: results are correlations of an extended image with taps in correlation order,
 *
 *     result[r, c] = Σⱼ Σᵢ taps[j, i] · extended[r + j, c + i]
 *
 * so that convolution, origins, extents, regions and borders are settled before any method sees them.
 */
export interface Problem {
  request: Request;
  analysis: KernelAnalysis;
  /** Taps in correlation order: reversed for a convolution. */
  reversed: boolean;
  horizontal: Axis;
  vertical: Axis;
  /** Result column of the whole where these results begin: 0 but for a panel (planning/panels). */
  column: number;
  /** And the row: 0 but for a band (planning/bands). */
  row: number;
  channels: number;
  /** Channels that are colours; the others are alpha. */
  colours: number;
  /** The full value among working floats: 1 for linear light, else the sample type's. */
  workingFull: number;
  renormalised: boolean;
  build: Build;
  /** Bytes that a filter may still take from the engine. */
  bytesAvailable: number;
  /** Threads that may work on it. */
  crew: Crew;
  /** Where taps were replaced, the problem with the taps before: tiles are taken over from it. */
  like?: Problem;
  /** Of a part (a region, planning/panels, planning/bands) the problem that it was cut from: what decides bytes of results is decided for the whole. */
  whole?: Problem;
  /** Where several threads work on one program together: how many, and the problem as one thread has it, which decides the tiles. */
  together?: { threads: number; alone: Problem };
}

/** The threads of an engine, the calling one included, and whether they share its memory. */
export interface Crew {
  threads: number;
  shared: boolean;
}

const oneThread: Crew = { threads: 1, shared: false };

const indexRule = (rule: BorderRule): IndexRule => (typeof rule === "object" || rule === "zero" || rule === "renormalised" ? "outside" : rule);

/** Position of result 0 in image coordinates, and results, before a region is cut out. */
export function extentOf(extent: Extent, samples: number, taps: number, anchor: number): { start: number; count: number } {
  if (extent === "same") return { start: 0, count: samples };
  if (extent === "full") return { start: anchor - taps + 1, count: samples + taps - 1 };
  return { start: anchor, count: samples - taps + 1 };
}

/** Position of tap 0's sample: the origin as seen from the first tap in correlation order. */
export function anchorOf(taps: number, origin: number, reversed: boolean): number {
  return reversed ? taps - 1 - origin : origin;
}

function axis(request: Request, rule: BorderRule, samples: number, taps: number, origin: number, cut: { start: number; count: number }): Axis {
  const anchor = anchorOf(taps, origin, !request.correlate);
  const first = extentOf(request.extent, samples, taps, anchor).start + cut.start - anchor;
  const extended = cut.count + taps - 1;
  return { rule, count: cut.count, taps, first, extended, anchor, map: indexMap(indexRule(rule), first, extended, samples) };
}

/** The same without a region; nothing where it is all of the results. */
function withoutRegion(request: Request): Request | undefined {
  const { kernel, extent, region } = request;
  const { count: width } = extentOf(extent, request.width, kernel.width, 0);
  const { count: height } = extentOf(extent, request.height, kernel.height, 0);
  return region.width === width && region.height === height ? undefined : { ...request, region: { x: 0, y: 0, width, height } };
}

export function problemOf(request: Request, build: Build, bytesAvailable: number, crew = oneThread): Problem {
  const { kernel, region } = request;
  const renormalised = request.rows === "renormalised" || request.columns === "renormalised";
  // Only weights inside differ between a region and the whole: they decide how many separable terms are left out.
  const whole = renormalised ? withoutRegion(request) : undefined;
  const vertical = axis(request, request.rows, request.height, kernel.height, kernel.origin.y, { start: region.y, count: region.height });
  const horizontal = axis(request, request.columns, request.width, kernel.width, kernel.origin.x, { start: region.x, count: region.width });
  return {
    request,
    analysis: analyse(kernel),
    reversed: !request.correlate,
    horizontal,
    vertical,
    column: 0,
    row: 0,
    channels: request.channels,
    colours: request.alpha === "none" ? request.channels : request.channels - 1,
    workingFull: request.light === "linear" ? 1 : sampleFacts[request.sample].full,
    renormalised,
    build,
    bytesAvailable,
    crew,
    ...(whole ? { whole: problemOf(whole, build, bytesAvailable, crew) } : {}),
  };
}

/** Results start … start + count − 1 of an axis. */
export function cutAxis(axis: Axis, start: number, count: number): Axis {
  const extended = count + axis.taps - 1;
  return { ...axis, count, first: axis.first + start, extended, map: axis.map.subarray(start, start + extended) };
}

/** The taps in correlation order. */
export function correlationTaps(problem: Problem): Float64Array<ArrayBuffer> {
  const taps = readTaps(problem.request.kernel).slice();
  return problem.reversed ? taps.reverse() : taps;
}

/** By kernel: the taps as written, and reversed. */
const floats = /* @__PURE__ */ new WeakMap<Kernel, [Float32Array<ArrayBuffer>?, Float32Array<ArrayBuffer>?]>();

/** The same in single precision, without those that weigh next to nothing; made once for a kernel. */
export function floatTaps({ request: { kernel }, reversed }: Problem): Float32Array<ArrayBuffer> {
  const made = floats.get(kernel) ?? [];
  floats.set(kernel, made);
  const asWritten = (made[0] ??= keptFloats(readTaps(kernel)));
  return reversed ? (made[1] ??= asWritten.slice().reverse()) : asWritten;
}

/** A vector of a separable term in correlation order. */
export function inCorrelationOrder(problem: Problem, vector: Float64Array<ArrayBuffer>): Float64Array<ArrayBuffer> {
  return problem.reversed ? vector.slice().reverse() : vector;
}

/** Floats of one of the core's working vectors. */
export function vectorFloats(problem: Problem): number {
  return problem.build === "scalar" ? 1 : 4;
}
