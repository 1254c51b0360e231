export { createEngine } from "./api/engine.js";
export { ConvolutionError, type ErrorCode, type Fault } from "./errors.js";
export * from "./kernels/index.js";
export type {
  Alpha,
  Border,
  BorderRule,
  Build,
  Candidate,
  Channels,
  ConvolveOptions,
  Engine,
  EngineOptions,
  Explanation,
  Extent,
  Filter,
  HardwareProfile,
  Layout,
  Light,
  Method,
  Output,
  PrepareOptions,
  Raster,
  Region,
  ResultArray,
  ResultRaster,
  Samples,
  SampleType,
} from "./types.js";
