import { ConvolutionError } from "../errors.js";
import type { Kernel } from "../kernels/index.js";
import type { Choice } from "../planning/choose.js";
import { changeKernel, type KernelChange } from "../planning/kernelChange.js";
import type { Problem } from "../planning/problem.js";
import { samplesChanged } from "../runtime/execution.js";
import type { Explanation, Filter, Raster, ResultArray, ResultRaster, RunOptions, Samples, SampleType, ViewArray } from "../types.js";
import { anyClaims, checkUnclaimed, samplesStretch } from "./claims.js";
import type { EngineParts } from "./engineParts.js";
import { JobQueue, type Order } from "./jobs.js";
import { runnerOf, type Runner } from "./runner.js";
import type { CheckedRaster } from "./validate/raster.js";
import { checkedReplacement, type ImageShape } from "./validate/request.js";
import { checkedRunOptions, type CheckedRunOptions } from "./validate/runOptions.js";
import { checkedSource, checkedTarget } from "./validate/target.js";
import { View } from "./views.js";

/** An array for results: the source's own kind where the sample type is the same, else what `ImageData` and the like take. */
function newSamples(sample: SampleType, source: CheckedRaster, length: number): Samples {
  try {
    if (sample === "f32") return new Float32Array(length);
    if (sample === "u16") return new Uint16Array(length);
    const plain = source.sample === "u8" && Object.prototype.toString.call(source.data) === "[object Uint8Array]";
    return plain ? new Uint8Array(length) : new Uint8ClampedArray(length);
  } catch (cause) {
    const message = `The host cannot make an array of ${length} ${sample} samples for the result. Give a target, or filter by regions.`;
    throw new ConvolutionError("memory-exhausted", message, { expected: "room for the result", received: length, cause });
  }
}

function disposedError(call: string): ConvolutionError {
  const message = `${call}: the filter was disposed, by itself or with its engine, and its memory is given back. Prepare it anew on an engine that is not disposed.`;
  return new ConvolutionError("disposed", message, { expected: "a filter that is not disposed", received: "a disposed filter" });
}

function busyError(call: string): ConvolutionError {
  const message = `${call}: the filter has unfinished runAsync jobs, and does one at a time. Wait for them, abort them, or prepare another filter.`;
  return new ConvolutionError("filter-busy", message, { expected: "a filter without unfinished jobs", received: "a busy filter" });
}

/** Tells how a filter was chosen, or how it stands after its taps were replaced. */
type Explain = (problem: Problem, choice: Choice, change?: KernelChange) => Explanation;

/** A plan with its memory in the engine. */
export class PreparedFilter<T extends SampleType = never, S extends SampleType = SampleType> implements Filter<T, S> {
  readonly #explain: Explain;
  #explanation: (() => Explanation) | Explanation;
  #problem: Problem;
  #choice: Choice;
  readonly #engine: EngineParts;
  readonly #leave: () => void;
  readonly #runner: Runner;
  readonly #jobs: JobQueue;
  readonly #layout: ImageShape;
  readonly #result: ImageShape;
  readonly #views: { source: View; result: View };
  #disposed = false;

  constructor(problem: Problem, choice: Choice, explain: Explain, engine: EngineParts, leave: () => void) {
    const { memory } = engine.core;
    const { request, horizontal, vertical } = problem;
    this.#explain = explain;
    this.#problem = problem;
    this.#choice = choice;
    this.#explanation = () => explain(problem, choice);
    this.#engine = engine;
    this.#leave = leave;
    this.#layout = request;
    this.#result = { width: horizontal.count, height: vertical.count, channels: request.channels, sample: request.output.sample };
    this.#views = { source: new View(this.#layout, memory, engine.views), result: new View(this.#result, memory, engine.views) };
    this.#runner = runnerOf(choice, problem, engine.core, engine.crew);
    this.#jobs = new JobQueue(this.#runner, engine.turns);
  }

  /** Put together when it is first asked for. */
  get explanation(): Explanation {
    if (typeof this.#explanation === "function") this.#explanation = this.#explanation();
    return this.#explanation;
  }

  get source(): ResultRaster<ViewArray<S>> {
    this.#usable("source");
    return this.#views.source.raster as ResultRaster<ViewArray<S>>;
  }

  get result(): ResultRaster<ViewArray<[T] extends [never] ? S : T>> {
    this.#usable("result");
    return this.#views.result.raster as ResultRaster<ViewArray<[T] extends [never] ? S : T>>;
  }

  get viewBytes(): number {
    return this.#views.source.byteLength + this.#views.result.byteLength;
  }

  run(): ResultRaster<ViewArray<[T] extends [never] ? S : T>>;
  run<A extends Samples>(image: Raster<A>): ResultRaster<ResultArray<A, T>>;
  run<R extends Raster>(image: Raster | undefined, target: R): R;
  run(image?: Raster, target?: Raster): Raster {
    this.#usable("run");
    if (this.#jobs.busy) throw busyError("run");
    const source = this.#source("run", image, target);
    const checked = this.#target("run", image, target, source);
    if (anyClaims()) checkUnclaimed({ owner: this, ...this.#stretches(source, checked) });
    if (checked === undefined) return this.#runIntoNew(source);
    this.#runner.run(source, checked);
    return target ?? this.#views.result.raster;
  }

  #runIntoNew(source: CheckedRaster): Raster {
    const { checked, raster } = this.#ownTarget(source);
    this.#runner.run(source, checked);
    return raster;
  }

  async runAsync(image?: Raster, given?: RunOptions<Raster>): Promise<never> {
    this.#usable("runAsync");
    const options = checkedRunOptions(given);
    const source = this.#source("runAsync", image, options.target);
    const target = this.#target("runAsync", image, options.target, source);
    if (options.signal?.aborted) return Promise.reject(options.signal.reason);
    return this.#jobs.add(this.#order(options, source, target)) as Promise<never>;
  }

  replaceKernel(given: Kernel): void {
    this.#usable("replaceKernel");
    if (this.#jobs.busy) throw busyError("replaceKernel");
    const kernel = checkedReplacement("replaceKernel", given, this.#problem.request);
    const change = changeKernel(this.#problem, this.#choice, this.#runner.blockBytes, kernel);
    this.#runner.replace(change.blocks);
    this.#problem = change.problem;
    this.#choice = change.choice;
    this.#explanation = () => this.#explain(change.problem, change.choice, change);
  }

  dispose(): void {
    if (this.#disposed) return;
    this.#disposed = true;
    this.#jobs.dispose(disposedError("runAsync"));
    this.#runner.dispose();
    this.#views.source.dispose();
    this.#views.result.dispose();
    this.#leave();
  }

  #usable(call: string): void {
    if (this.#disposed) throw disposedError(call);
  }

  #source(call: string, image: Raster | undefined, target: unknown): CheckedRaster {
    // Memory that grows leaves older arrays behind: both views are reserved before either is looked at.
    if (image === undefined && target === undefined) this.#views.result.reserve();
    const source = checkedSource(call, image === undefined ? this.#views.source.raster : image, this.#layout);
    this.#checkLive(call, source);
    return source;
  }

  /** The caller's target, or the view where there is neither image nor target; nothing where the result is a raster of its own. */
  #target(call: string, image: unknown, target: unknown, source: CheckedRaster): CheckedRaster | undefined {
    if (target === undefined && image !== undefined) return undefined;
    const raster = target === undefined ? this.#views.result.raster : target;
    const checked = checkedTarget(call, raster, source, this.#engine.core.memory, this.#result);
    this.#checkLive(call, checked);
    return checked;
  }

  /** @throws ConvolutionError `detached-samples` for a view whose filter is gone */
  #checkLive(call: string, { data }: CheckedRaster): void {
    if (this.#engine.views.isLive(data)) return;
    const message = `${call}: the array is a view of a filter that was disposed, and its memory is given back. Take source and result from a filter that is not disposed.`;
    throw new ConvolutionError("detached-samples", message, { expected: "a view of a filter in use", received: "a view of a disposed filter" });
  }

  #ownTarget(source: CheckedRaster): { checked: CheckedRaster; raster: Raster } {
    const { width, height, channels, sample } = this.#result;
    const data = newSamples(sample, source, width * height * channels);
    const { colorSpace } = source;
    const checked: CheckedRaster = { data, sample, width, height, channels, stride: width * channels, colorSpace };
    return { checked, raster: { data, width, height, channels, ...(colorSpace === undefined ? {} : { colorSpace }) } };
  }

  #stretches(source: CheckedRaster, target: CheckedRaster | undefined) {
    const { memory } = this.#engine.core;
    return { source: samplesStretch(source.data, memory), target: target && samplesStretch(target.data, memory) };
  }

  #order(options: CheckedRunOptions, source: CheckedRaster, target: CheckedRaster | undefined): Order {
    const sourceLater = this.#later("image", source);
    const targetLater = target && this.#later("target", target);
    const begin = (): (() => Raster) => {
      const { checked, raster } = targetLater ? { checked: targetLater(), raster: options.target as Raster | undefined } : this.#ownTarget(source);
      this.#runner.begin(sourceLater(), checked);
      return () => raster ?? this.#views.result.raster;
    };
    return { claim: { owner: this, ...this.#stretches(source, target) }, options, begin };
  }

  /** A raster as it will be when its job begins: views of the memory anew, other arrays only if they are as long as they were. */
  #later(what: string, raster: CheckedRaster): () => CheckedRaster {
    const { memory } = this.#engine.core;
    const { data, sample } = raster;
    const { length } = data;
    const address = memory.addressOf(data);
    if (address !== undefined) return () => ({ ...raster, data: memory.samplesAt(sample, address, length) });
    return () => {
      if (data.length < length) throw samplesChanged(what);
      return raster;
    };
  }
}
