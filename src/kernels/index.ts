export type { Kernel, Origin } from "./kernel.js";
export { type KernelOptions, kernel, outer } from "./fromTaps.js";
export { normalised, reversed, scaled } from "./derive.js";
export type { PerAxis } from "./sides.js";
export { type DeltaOptions, delta } from "./delta.js";
export { type BoxOptions, box } from "./box.js";
export { type BinomialOptions, binomial } from "./binomial.js";
