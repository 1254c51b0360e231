import { createEngine, sharpen, type Engine, type EngineOptions, type Layout } from "../../src/index.js";
import { shippedProfiles } from "../../src/planning/profile.js";
import { planesOf } from "../inputs.js";
import { spreadOf } from "../spread.js";

const small: Required<Layout> = { width: 256, height: 128, channels: 1, sample: "u8" };
const runs = 400;
const restMilliseconds = 20;

/** What handing half of a small image to another thread adds to a run, in microseconds: at once, and where the threads have slept. */
export async function handOverPrices(
  single: Engine,
  createWorker: NonNullable<EngineOptions["createWorker"]>,
): Promise<Record<"microseconds" | "afterIdle", number>> {
  const shipped = shippedProfiles.find(({ build }) => build === single.build)!;
  const free = { ...shipped, nanoseconds: { ...shipped.nanoseconds, handOver: 0, meeting: 0, handedByte: 0 } };
  const double = await createEngine({ threads: 2, createWorker, profile: free });
  const times = [single, double].map((engine) => {
    const filter = engine.prepare(sharpen(), small, { method: "direct" });
    if (engine === double && filter.explanation.threads !== 2) throw new Error("The small image stays on one thread.");
    const image = planesOf(small, 1)[0]!;
    const target = filter.run(image);
    const time = (): number => {
      const begun = performance.now();
      filter.run(image, target);
      return 1000 * (performance.now() - begun);
    };
    const rested = (): number => {
      Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, restMilliseconds);
      return time();
    };
    return [time, rested].map((one, index) => spreadOf(Array.from({ length: index === 0 ? runs : runs / 8 }, one)).median);
  });
  double.dispose();
  return { microseconds: times[1]![0]! - times[0]![0]! / 2, afterIdle: times[1]![1]! - times[0]![1]! / 2 };
}
