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
}

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
      title: "Estimate the lamp",
      purpose: "A wide Gaussian keeps how the lamp falls off over the sheet and takes the detail away.",
      kernelName: "Gaussian, σ = 12",
      kernel: gaussian({ sigma: 12 }),
      options: {},
      madeFor: "separable",
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
