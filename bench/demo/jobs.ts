import { gaussian, sharpen, type ConvolveOptions, type Kernel, type Method } from "../../src/index.js";
import { pointSpread } from "./pointSpread.js";

/** One thing the herbarium does with a photographed sheet. */
export interface Job {
  /** Name of the files it writes. */
  file: string;
  title: string;
  /** What it is for, in a sentence. */
  purpose: string;
  kernelName: string;
  kernel: Kernel;
  options: ConvolveOptions;
  /** The method that the job is made for; printed beside the choice and never passed to the engine. */
  madeFor: Method;
  /** The kernel's builder over its width, where it shows that the choice follows the width. */
  family?: Family;
}

/** Kernels of one kind. */
export interface Family {
  /** "Gaussian" */
  name: string;
  /** The letter and unit of what is varied. */
  symbol: string;
  values: readonly number[];
  kernelOf(value: number): Kernel;
}

/** Standard deviation of the second job's Gaussian in pixels: 25 × 25 taps, wide for direct and not yet wide enough for the FFT. */
export const gaussianSigma = 3;

/** The three jobs: few taps, many taps that are an outer product, many taps that are not. */
export function threeJobs(): Job[] {
  return [
    {
      file: "sharpened",
      title: "Sharpen the veins",
      purpose: "The key to the genus counts side veins; a small sharpening brings them out before the sheet is read.",
      kernelName: "sharpen, amount ½",
      kernel: sharpen(0.5),
      options: {},
      madeFor: "direct",
    },
    {
      file: "softened",
      title: "Calm the paper",
      purpose: "A Gaussian takes the paper's grain away before the area of the leaves is counted.",
      kernelName: `Gaussian, σ = ${gaussianSigma}`,
      kernel: gaussian(gaussianSigma),
      options: {},
      madeFor: "separable",
      family: { name: "Gaussian", symbol: "σ", values: Array.from({ length: 24 }, (_, index) => (index + 1) / 2), kernelOf: (sigma) => gaussian(sigma) },
    },
    {
      file: "old-lens",
      title: "See it through the old lens",
      purpose: "To set it beside the founders' plates, the photograph is given the point spread of their bellows lens.",
      kernelName: "the lens's point spread",
      kernel: pointSpread(),
      options: {},
      madeFor: "fft",
    },
  ];
}
