/**
 * Runs a filter over small frames in a process whose young generation holds them all, and prints how many bytes of garbage a frame
 * leaves: the least of several intervals, as compiled code and the like come once. Needs --expose-gc and a --min-semi-space-size.
 */
import { GCProfiler, getHeapStatistics } from "node:v8";
import { createEngine, type Filter, type Method } from "../../src/index.js";
import { kernelFor } from "./methodKernels.js";
import { noiseImage } from "../support/noise.js";

const collect = (globalThis as { gc?: () => void }).gc!;
const framesInAll = 20_000;
const layout = { width: 16, height: 16, channels: 4, sample: "u8" } as const;
const arrays = [1, 2, 3].map((seed) => noiseImage("u8", 16, 16, 4, seed).data);
const target = { ...layout, data: new Uint8ClampedArray(16 * 16 * 4) };

/** Frames as a page gives them, all made beforehand: what is measured is the filter's garbage and not theirs. */
const ways: Record<string, (filter: Filter<never, "u8">) => (frame: number) => void> = {
  "the same rasters"(filter) {
    const images = arrays.map((data) => ({ ...layout, data }));
    return (frame) => void filter.run(images[frame % 3], target);
  },
  "new rasters of the same arrays"(filter) {
    const images = Array.from({ length: framesInAll }, (_, frame) => ({ data: arrays[frame % 3]!, width: 16, height: 16 }));
    const targets = images.map(() => ({ data: target.data, width: 16, height: 16 }));
    return (frame) => void filter.run(images[frame], targets[frame]!);
  },
  views(filter) {
    const { data } = filter.source;
    return (frame) => {
      data[0] = frame;
      filter.run();
    };
  },
  "views as image and target"(filter) {
    const { source, result } = filter;
    return () => void filter.run(source, result);
  },
};

/** Bytes that came meanwhile. Requires that nothing is collected until then, which is checked. */
function bytesDuring(work: () => void): number {
  for (let round = 0; round < 3; round++) collect();
  const profiler = new GCProfiler();
  profiler.start();
  const before = getHeapStatistics().used_heap_size;
  work();
  const bytes = getHeapStatistics().used_heap_size - before;
  if (profiler.stop()!.statistics.length > 0) throw new Error("Garbage was collected: the young generation is too small, or the garbage too much.");
  return bytes;
}

function garbageOf(runFrame: (frame: number) => void): number {
  const runFrames = (): void => {
    for (let frame = 0; frame < framesInAll; frame++) runFrame(frame);
  };
  runFrames();
  return Math.min(...Array.from({ length: 5 }, () => bytesDuring(runFrames))) / framesInAll;
}

const method = process.argv[2] as Method;
const engine = await createEngine();
const filter = engine.prepare(kernelFor[method], layout, { method });
console.log(JSON.stringify(Object.entries(ways).map(([way, framesOf]) => [way, garbageOf(framesOf(filter))])));
