import { ConvolutionError, createEngine, type Build, type Engine } from "../../src/index.js";

const relaxed = await createEngine({ build: "relaxed-simd" }).catch((error: unknown) => {
  if (error instanceof ConvolutionError && error.code === "webassembly-missing") return undefined;
  throw error;
});

/** Every build that each test body runs on: the fused one where the host has it (Chromium, Node 22 and later). */
export const builds: readonly Build[] = relaxed ? ["simd", "scalar", "relaxed-simd"] : ["simd", "scalar"];

/** One engine of each build, made once for all tests of a file. */
export const engines = {
  "simd": await createEngine({ build: "simd" }),
  "scalar": await createEngine({ build: "scalar" }),
  "relaxed-simd": relaxed,
} as Readonly<Record<Build, Engine>>;
