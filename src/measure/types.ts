import type { Border, Build, Channels, HardwareProfile, Layout, Method, SampleType } from "../types.js";

export interface MeasureProfileOptions {
  /** About how long it takes; at most a quarter longer. @defaultValue 2000 */
  milliseconds?: number;
  /** Ends the measurement when it is aborted: the promise is rejected with its reason. @defaultValue none */
  signal?: AbortSignal;
  /** Called after each sample with the part that is done, never less than before, and with 1 at the end. @defaultValue none */
  onProgress?: (progress: number) => void;
}

export interface MeasureCrossoverOptions {
  /** Columns of the images that are filtered. */
  width: number;
  /** Rows. */
  height: number;
  /** @defaultValue 1 */
  channels?: Channels;
  /** @defaultValue `"u8"` */
  sample?: SampleType;
  /** Kernel sizes to measure among, odd numbers of taps a side. @defaultValue 3, 5, 7 … 127, the larger ones further apart */
  sizes?: readonly number[];
  /** @defaultValue `"replicate"` */
  border?: Border;
  /** True: bells, which are separable. False: kernels without structure, which are not. @defaultValue `true` */
  separable?: boolean;
  /** About how long it takes. @defaultValue 10000 */
  milliseconds?: number;
  /** Ends the measurement when it is aborted: the promise is rejected with its reason. @defaultValue none */
  signal?: AbortSignal;
  /** Called after each sample with the part that is done and what has been measured so far. @defaultValue none */
  onProgress?: (progress: number, soFar: Crossover) => void;
}

/** A number for each method that was timed. */
export type ByMethod<T> = Partial<Record<Method, T>>;

/** One kernel size. */
export interface CrossoverRow {
  /** Taps a side. */
  size: number;
  /** Measured time of one run: medians. */
  milliseconds: ByMethod<number>;
  /** The middle half of the times that were measured: lower and upper quartile. */
  quartiles: ByMethod<[low: number, high: number]>;
  /** Times that were measured. */
  samples: number;
  /** By the engine's profile. */
  predicted: ByMethod<number>;
  /** What the engine would choose. */
  chosen: Method;
  /** What was fastest here. */
  fastest: Method;
  /** Time of the chosen method over that of the fastest, less 1; 0 where the two are nearer than the noise. */
  regret: number;
}

/** Where one method overtakes another as kernels grow. */
export interface Crossing {
  /** Faster below. */
  from: Method;
  /** Faster above. */
  to: Method;
  /** Kernel size where both take the same time, between two that were measured. */
  size: number;
  /** At the lower end the first method was still faster beyond noise, at the upper end the second one already. */
  interval: [low: number, high: number];
  /** True where these two are the fastest of all methods there. */
  leading: boolean;
}

/** What `measureCrossover` found: plain data, JSON as it is. */
export interface Crossover {
  layout: Required<Layout>;
  border: Border;
  separable: boolean;
  /** By size. */
  rows: CrossoverRow[];
  /** By size; none where no method overtakes another in the range. */
  crossings: Crossing[];
  /** Sentences for people: no crossing in the range, a coarse clock, sizes that were too slow to measure. */
  notes: string[];
  host: string;
  build: Build;
  threads: number;
  /** The name of the profile that predicted. */
  profile: string;
  /** ISO 8601. */
  date: string;
}

export type { HardwareProfile };
