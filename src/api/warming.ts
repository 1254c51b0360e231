import { fillWithNoise } from "../math/noise.js";
import type { MethodPlan } from "../planning/method.js";
import { problemOf, type Problem, type Request } from "../planning/problem.js";
import { sampleFacts } from "../planning/samples.js";
import { execute, install } from "../runtime/execute.js";
import { Execution } from "../runtime/execution.js";
import type { Routines } from "../runtime/routines.js";
import type { SampleType } from "../types.js";
import type { Core } from "./loading.js";

/**
 * JavaScript engines compile WebAssembly quickly first, and well only what has proved to be busy: a routine's first milliseconds take
 * several times as long as later ones. So a filter's routines are made busy while it is prepared, on an image of this many multiply–adds
 * at most, as often as this or for as long as this (bench/results/cold-start-*.json: what the first run takes beside the tenth).
 */
const mostWork = 50_000;
const mostRuns = 100;
const mostMilliseconds = 12;

/** Vectors, blocks of vectors and what is left of a row all occur. */
const mostColumns = 68;
const mostRows = 16;

/** What is warm already, by linked core: forms of methods with the samples that they read and write. */
const warm = new WeakMap<Routines, Set<string>>();

const arrays = { u8: Uint8Array, u16: Uint16Array, f32: Float32Array } as const;

/** Noise goes through every branch of the routines: black would know only the straight part of the sRGB curve. */
function noise(sample: SampleType, count: number): Uint8Array<ArrayBuffer> | Uint16Array<ArrayBuffer> | Float32Array<ArrayBuffer> {
  const data = new arrays[sample](count);
  fillWithNoise(data, sampleFacts[sample].full);
  return data;
}

/** The same question for an image that is only as large as mostWork allows. */
function tiny(request: Request): Request {
  const { kernel, channels } = request;
  const affordable = Math.max(1, Math.floor(mostWork / (kernel.width * kernel.height * channels)));
  const width = Math.min(request.width, mostColumns, Math.max(4, affordable));
  const height = Math.min(request.height, mostRows, Math.max(2, Math.floor(affordable / width)));
  return { ...request, width, height, extent: "same", region: { x: 0, y: 0, width, height } };
}

/**
 * Runs the routines of a plan on a tiny image until the JavaScript engine has compiled them for good, where this core has not run
 * them before. The memory is given back; where there is too little of it, the first run warms them.
 */
export function warmUp({ build, memory, routines }: Core, plan: MethodPlan, problem: Problem): void {
  const request = tiny(problem.request);
  const what = [plan.name, plan.variant, request.sample, request.output.sample].join(" ");
  const known = warm.get(routines) ?? new Set();
  if (known.has(what)) return;
  warm.set(routines, known.add(what));
  const program = plan.program(problemOf(request, build, memory.largestBlock));
  if (program.byteLength > memory.largestBlock) return;
  const installed = install([program], memory, routines);
  const execution = new Execution(installed, memory, routines);
  const stride = request.width * request.channels;
  const source = { data: noise(request.sample, stride * request.height), stride };
  const target = { data: noise(request.output.sample, stride * request.height), stride };
  const end = performance.now() + mostMilliseconds;
  for (let run = 0; run < mostRuns && performance.now() < end; run++) execute(execution, source, target);
  memory.release(installed.address, installed.byteLength);
}
