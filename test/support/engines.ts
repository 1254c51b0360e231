import { createEngine, type Build, type Engine } from "../../src/index.js";

/** Every build that each test body runs on. */
export const builds: readonly Build[] = ["simd", "scalar"];

/** One engine of each build, made once for all tests of a file. */
export const engines: Readonly<Record<Build, Engine>> = {
  simd: await createEngine({ build: "simd" }),
  scalar: await createEngine({ build: "scalar" }),
};
