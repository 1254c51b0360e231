import { ConvolutionError, box, type Engine } from "../../src/index.js";

/** A limit for engines whose memory is looked at: what is asked for below is more. */
export const knownLimit = 2 ** 23;

/** Bytes of the largest filter that an engine with a known limit still has memory for, as it says when asked for more. */
export function memoryLeft(engine: Engine): number {
  try {
    engine.explain(box(3), { width: 4, height: 3_000_000, channels: 4, sample: "f32" });
  } catch (error) {
    if (error instanceof ConvolutionError && error.code === "memory-limit") return Number(/(\d+) bytes/.exec(String(error.expected))![1]);
    throw error;
  }
  throw new Error("the engine has more memory than the known limit");
}
