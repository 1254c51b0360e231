import type { Kernel } from "./kernels/kernel.js";

/** The arrays that hold samples. */
export type Samples = Uint8Array | Uint8ClampedArray | Uint16Array | Float32Array;

/** The sample types: 8-bit and 16-bit unsigned integers, 32-bit floats. Full values 255, 65535 and 1. */
export type SampleType = "u8" | "u16" | "f32";

export type Channels = 1 | 2 | 3 | 4;

/**
 * An image in memory: rows from top to bottom, pixels from left to right, channels interleaved.
 * An `ImageData`, a decoded PNG and a plain object all fit.
 */
export interface Raster<S extends Samples = Samples> {
  /** Samples; at least (height − 1) · stride + width · channels of them. */
  data: S;
  /** Columns. */
  width: number;
  /** Rows. */
  height: number;
  /** Samples per pixel. @defaultValue `data.length / (width · height)` */
  channels?: Channels;
  /** Samples from the start of one row to the start of the next. @defaultValue `width · channels` */
  stride?: number;
  /** Carried through to the result unchanged. */
  colorSpace?: string;
}

/** What `convolve` and `run` give back: own tight memory, the source's kind of array unless `output.sample` says otherwise. */
export interface ResultRaster<S extends Samples = Samples> extends Raster<S> {
  channels: Channels;
}

/**
 * The array of a result: where `output.sample` (T) is not given, the source's own kind (S), in memory of its own. Where it is: a
 * `Uint8ClampedArray` (which `new ImageData(…)` takes) unless the source is 8-bit itself, a `Uint16Array` or a `Float32Array`.
 */
export type ResultArray<S extends Samples, T extends SampleType = never> = [T] extends [never]
  ? OwnArray<S>
  : T extends "u8"
    ? S extends Uint8Array | Uint8ClampedArray
      ? OwnArray<S>
      : Uint8ClampedArray<ArrayBuffer>
    : T extends "u16"
      ? Uint16Array<ArrayBuffer>
      : Float32Array<ArrayBuffer>;

/** The same kind of array on a buffer that nobody shares. */
type OwnArray<S extends Samples> = S extends Uint8ClampedArray
  ? Uint8ClampedArray<ArrayBuffer>
  : S extends Uint8Array
    ? Uint8Array<ArrayBuffer>
    : S extends Uint16Array
      ? Uint16Array<ArrayBuffer>
      : S extends Float32Array
        ? Float32Array<ArrayBuffer>
        : never;

/** The shape of the images that a prepared filter takes. */
export interface Layout<S extends SampleType = SampleType> {
  width: number;
  height: number;
  /** @defaultValue 1 */
  channels?: Channels;
  /** @defaultValue `"u8"` */
  sample?: S;
}

/**
 * The array of a view of engine memory: bytes in the array that `new ImageData(…)` takes. In an engine with threads that share memory it
 * lies on a `SharedArrayBuffer`, which browsers refuse in `ImageData`: use a target there.
 */
export type ViewArray<S extends SampleType> = S extends "u8"
  ? Uint8ClampedArray<ArrayBuffer>
  : S extends "u16"
    ? Uint16Array<ArrayBuffer>
    : Float32Array<ArrayBuffer>;

/**
 * What the image is outside itself, on one axis.
 *
 *     replicate                a a a | a b c d | d d d      periodic                 b c d | a b c d | a b c
 *     half-sample-symmetric    c b a | a b c d | d c b      whole-sample-symmetric   d c b | a b c d | c b a
 *     zero                     0 0 0 | a b c d | 0 0 0      { constant: v }          v v v | a b c d | v v v
 *     renormalised             outside is left out and the sum divided by the weight that fell inside
 */
export type BorderRule =
  | "replicate"
  | "zero"
  | "periodic"
  | "half-sample-symmetric"
  | "whole-sample-symmetric"
  | "renormalised"
  | { constant: number | readonly number[] };

/** One rule for both axes, or one each: `rows` for row indices outside the image (above and below), `columns` for column indices. */
export type Border = BorderRule | { rows?: BorderRule; columns?: BorderRule };

/** Which results are computed: as many as samples, every position where the kernel meets the image, or those where it lies inside. */
export type Extent = "same" | "full" | "valid";

export type Method = "direct" | "separable" | "fft" | "running-sum";

/** A rectangle of the output, in samples. */
export interface Region {
  x: number;
  y: number;
  width: number;
  height: number;
}

export type Alpha = "straight" | "premultiplied" | "keep" | "none";
export type Light = "encoded" | "linear";

/** result = gain · y + offset, in the output's own units. */
export interface Output<T extends SampleType = SampleType> {
  /** @defaultValue the source's sample type */
  sample?: T;
  /** @defaultValue 1 */
  gain?: number;
  /** @defaultValue 0 */
  offset?: number;
}

export interface ConvolveOptions<T extends SampleType = SampleType> {
  /** @defaultValue `"replicate"` */
  border?: Border;
  /** @defaultValue `"same"` */
  extent?: Extent;
  /** @defaultValue `"auto"`: the fastest by the engine's profile */
  method?: Method | "auto";
  /** What a method may add on purpose, in levels of the output. @defaultValue 1/16 for 8-bit results, 0 for the others */
  tolerance?: number;
  /** @defaultValue the whole output */
  region?: Region;
  /** @defaultValue `"straight"` with 2 or 4 channels (`"keep"` where the taps sum to nothing), `"none"` with 1 or 3 */
  alpha?: Alpha;
  /** @defaultValue `"encoded"` */
  light?: Light;
  output?: Output<T>;
}

/** Options of `prepare` and `explain`. */
export interface PrepareOptions<T extends SampleType = SampleType> extends ConvolveOptions<T> {
  /** Lay the taps on the image as written instead of reversed. @defaultValue `false` */
  correlate?: boolean;
  /**
   * `prepare` times the two or three best candidates on this layout before it decides: for at most about 0.2 seconds, or one run of each where that takes
   * longer, never more than a second. The verdict is kept for all problems of the shape, in `engine.profile` too. `explain` tells what is known already.
   *
   * @defaultValue `false`: predictions, and verdicts that are known
   */
  measure?: boolean;
}

/** One method as `explain` sees it. */
export interface Candidate {
  method: Method;
  /** Predicted time of one run. Absent where refused. */
  milliseconds?: number;
  /** Predicted time of preparing. */
  setupMilliseconds?: number;
  /** Engine memory that the filter would own. */
  bytes?: number;
  /** Largest difference from the exact result before rounding, in output units (contract: for samples up to the type's full value). */
  errorBound?: number;
  /** Arithmetic that decides the bytes of the result. */
  arithmetic?: string;
  /** Number of separable terms that are summed, for `separable`. */
  terms?: number;
  /** Threads that a run uses, the calling one included: fewer than the engine has where handing over would not pay. */
  threads?: number;
  /** Why the method does not apply, as a sentence. */
  refused?: string;
}

/** What was chosen and why: plain data that also prints as a table (`String(explanation)`). */
export interface Explanation {
  method: Method;
  arithmetic: string;
  /** Separable terms summed, where the method is `separable`. */
  terms?: number;
  /** One sentence: why this method. */
  because: string;
  errorBound: number;
  bytes: number;
  /** Threads that a run uses, the calling one included. */
  threads: number;
  /** Predicted time of one run. */
  milliseconds: number;
  setupMilliseconds: number;
  /** Engine build the prediction is for. */
  build: Build;
  /** Where the coefficients come from. */
  profile: string;
  candidates: Candidate[];
  toString(): string;
}

/**
 * The form of the core. "simd" and "scalar" give the same bytes on every processor; "relaxed-simd" adds products without rounding them
 * before where the processor can, which is faster, and whose bytes differ between processors.
 */
export type Build = "simd" | "scalar" | "relaxed-simd";

/** Which method was fastest for problems of one shape when they were timed. */
export interface Verdict {
  /** What such problems have in common: layout, kernel size and structure, options. Written by the engine, not to be composed by hand. */
  shape: string;
  method: Method;
  /** Measured time of one run of each method that was timed. */
  milliseconds: Partial<Record<Method, number>>;
  /** ISO 8601. */
  date: string;
}

/** A problem that a profile was held against, which it was not fitted to. */
export interface ProfileCheck {
  problem: string;
  method: Method;
  /** Milliseconds of one run. */
  predicted: number;
  measured: number;
}

/** What counted operations cost on some hardware: plain data, JSON as it is. */
export interface HardwareProfile {
  version: 2;
  /** Where the profile comes from, for people. */
  host: string;
  build: Build;
  /** Threads of the engine that was measured. */
  threads: number;
  /** ISO 8601. */
  date: string;
  /** Nanoseconds per count, by the names of planning/cost. */
  nanoseconds: Record<string, number>;
  /** Standard error of each price as a share of it, where it was measured. A price without one was taken over in proportion to others. */
  spread?: Record<string, number>;
  checks?: ProfileCheck[];
  /** What `prepare(…, { measure: true })` found: used for such problems instead of predictions. */
  verdicts?: Verdict[];
  /** Sentences for people: what was left out, what was adapted. */
  notes?: string[];
}

/** As much of a worker as an engine uses: a page's `Worker` and one of Node's `worker_threads` both fit. */
export interface EngineWorker {
  postMessage(message: unknown, transfer?: readonly Transferable[]): void;
  terminate(): unknown;
}

export interface EngineOptions {
  /** @defaultValue `"auto"`: SIMD where the host has it and it passes the known-answer test, else scalar. Never `"relaxed-simd"` */
  build?: Build | "auto";
  /** @defaultValue the shipped profile */
  profile?: HardwareProfile;
  /** Bytes of engine memory at most. @defaultValue 4 GiB less one page, what 32-bit WebAssembly can address */
  memoryLimit?: number;
  /** A compiled module to use instead of the bundled one. */
  module?: WebAssembly.Module;
  /** Threads, the calling one included, 1…64: the others are workers. A run uses as many of them as pay. @defaultValue 1 */
  threads?: number;
  /**
   * Makes a worker of this package's worker script (`tapwise/worker`), where the bundler or the page needs it from elsewhere than beside the
   * package. Called for each further thread. @defaultValue a module worker, or one of Node's `worker_threads`
   */
  createWorker?: () => EngineWorker | undefined;
}

/** Options of `runAsync`. */
export interface RunOptions<R extends Raster = Raster> {
  /** Receives the result; as in `run`. @defaultValue a new raster, made when the job begins; `result` where there is no image either */
  target?: R;
  /** Ends the job when it is aborted: the promise is rejected with its reason. @defaultValue none */
  signal?: AbortSignal;
  /**
   * Called after each slice with the part of the work that is done, never less than before, and with 1 at the end. What it throws ends the
   * job. @defaultValue none
   */
  onProgress?: (progress: number) => void;
}

/** A prepared filter: the plan, the tables and the scratch for one kernel and one layout. T: the sample type that `output` asks for; S: the layout's. */
export interface Filter<T extends SampleType = never, S extends SampleType = SampleType> {
  /**
   * Filters one image of the prepared layout.
   *
   * @param image the layout's width, height, channels and sample type; any stride. `source` where absent
   * @param target receives the result; its size, channels and sample type must be the result's. A new raster where absent, or `result` where
   * there is no image either
   * @throws ConvolutionError `disposed`, `filter-busy`, `invalid-raster`, `layout-mismatch`, `invalid-target`, `overlapping-target`, `array-in-use`, …
   */
  run(): ResultRaster<ViewArray<[T] extends [never] ? S : T>>;
  run<A extends Samples>(image: Raster<A>): ResultRaster<ResultArray<A, T>>;
  run<R extends Raster>(image: Raster | undefined, target: R): R;
  /**
   * The same in slices of at most 8 milliseconds, between which the host handles events, timers and drawing. The filter does one job at a time: later
   * ones wait in order. The image is read, and the target written, while the job runs: leave both alone until it is over. After a failure the target holds undefined samples, and
   * the next run is right.
   *
   * Rejects with the signal's reason, with what `onProgress` throws, or with a ConvolutionError: those of `run`, `samples-changed` (an array was detached or made
   * shorter during the run), `disposed` (the filter or its engine was, while the job waited or ran).
   *
   * @example
   * const filter = engine.prepare(gaussian(4), { width: 64, height: 48, channels: 4 });
   * const blurred = await filter.runAsync(image, { onProgress: (done) => console.log(`${Math.round(100 * done)} %`) });
   */
  runAsync(image?: undefined, options?: RunOptions<never>): Promise<ResultRaster<ViewArray<[T] extends [never] ? S : T>>>;
  runAsync<A extends Samples>(image: Raster<A>, options?: RunOptions<never>): Promise<ResultRaster<ResultArray<A, T>>>;
  runAsync<R extends Raster>(image: Raster | undefined, options: RunOptions<R> & { target: R }): Promise<R>;
  /**
   * The image that `run()` reads: a view of engine memory in tight rows, reserved at first use. Fill it, call `run()`, read `result`: nothing is copied.
   * Take both anew each time, as memory that grows (at `prepare`, or when a view is reserved) leaves old arrays behind. Any filter of the engine reads it in place.
   * It ends with the filter: do not touch it after `dispose`.
   */
  readonly source: ResultRaster<ViewArray<S>>;
  /** The image that `run()` writes; as `source`. */
  readonly result: ResultRaster<ViewArray<[T] extends [never] ? S : T>>;
  /** Bytes of engine memory that `source` and `result` take, on top of `explanation.bytes`. */
  readonly viewBytes: number;
  /** What was chosen and why; after `replaceKernel`, how the method stands with the new taps. */
  readonly explanation: Explanation;
  /**
   * Takes other taps in place of the filter's own: the same width, height and origin, by the same method, in the memory that it has. The
   * results are those of a new filter that is forced to this method. `explanation` tells the new error bound, and the arithmetic where the
   * taps change it (the step of fixed-point taps, the number of separable terms).
   *
   * @throws ConvolutionError before anything is touched, so that the taps stay as they were: `disposed`, `filter-busy`, `invalid-kernel`,
   * `kernel-mismatch` (another size or origin, or more memory needed), `method-not-applicable` (the method does not apply to these
   * taps), `border-not-applicable`, `alpha-not-applicable`
   * @example
   * const filter = engine.prepare(gaussian({ sigma: 2, radius: 9 }), { width: 64, height: 48, channels: 4 });
   * for (const sigma of [1, 1.5, 2]) {
   *   filter.replaceKernel(gaussian({ sigma, radius: 9 }));
   *   filter.run(image, filter.result);
   * }
   */
  replaceKernel(kernel: Kernel): void;
  /** Gives the filter's memory back, and rejects its unfinished jobs. Safe to call twice. */
  dispose(): void;
}

export interface Engine {
  readonly build: Build;
  /** What predictions are made from: a copy, JSON as it is, with the verdicts of `prepare(…, { measure: true })`. Keep it, and give it to `createEngine` the next time. */
  readonly profile: HardwareProfile;
  /** Threads that are there now, the calling one included: fewer than asked for where the host lets none start, or where workers were lost. */
  readonly threads: number;
  /** Convolves (taps reversed) and returns a new raster. */
  convolve<S extends Samples, T extends SampleType = never>(image: Raster<S>, kernel: Kernel, options?: ConvolveOptions<T>): ResultRaster<ResultArray<S, T>>;
  /** Correlates (taps as written) and returns a new raster. */
  correlate<S extends Samples, T extends SampleType = never>(image: Raster<S>, kernel: Kernel, options?: ConvolveOptions<T>): ResultRaster<ResultArray<S, T>>;
  prepare<T extends SampleType = never, S extends SampleType = "u8">(kernel: Kernel, layout: Layout<S>, options?: PrepareOptions<T>): Filter<T, S>;
  /** Says what `prepare` would choose and why; allocates nothing in the engine. */
  explain(kernel: Kernel, layout: Layout, options?: PrepareOptions): Explanation;
  dispose(): void;
}
