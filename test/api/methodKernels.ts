import { binomial, box, kernel, type Kernel, type Method } from "../../src/index.js";
import { noiseKernel } from "../support/kernels.js";

/** A small kernel for each method, for the heap's tests. */
export const kernelFor: Record<Method, Kernel> = {
  direct: noiseKernel(3, 3, 1),
  separable: binomial(4),
  "running-sum": box(9),
  fft: kernel([
    [1, 2],
    [3, 4],
  ]),
};
