import {
  type Kernel,
  binomial,
  box,
  delta,
  differenceOfGaussians,
  disk,
  gaussian,
  laplacian,
  laplacianOfGaussian,
  line,
  prewitt,
  scharr,
  sharpen,
  sobel,
  unsharp,
} from "../index.js";

/** A value of a builder's option as the command line can spell it. */
export type BuilderValue = number | string | { x: number; y: number };

export interface Builder {
  /** Options in the order in which bare values fill them. */
  readonly parameters: readonly string[];
  /** How many of them must be given. */
  readonly required: number;
  readonly summary: string;
  build(options: Record<string, BuilderValue>): Kernel;
}

/** The library's builder checks names and values of its options itself; here they only pass through. */
function builder(build: (options: never) => Kernel, parameters: readonly string[], required: number, summary: string): Builder {
  return { parameters, required, summary, build: build as (options: Record<string, BuilderValue>) => Kernel };
}

/** Every kernel builder that the command line knows, by name. */
export const builders: Readonly<Record<string, Builder>> = {
  delta: builder(delta, ["width", "height", "position"], 0, "a single 1: no change, or a shift"),
  box: builder(box, ["width", "height"], 1, "mean of a rectangle"),
  binomial: builder(binomial, ["order"], 1, "smooths by a row of Pascal's triangle: 2 is 1 2 1"),
  gaussian: builder(gaussian, ["sigma", "radius", "sampling"], 1, "smooths by a bell"),
  disk: builder(disk, ["radius", "sampling"], 1, "mean of a disk, as out of focus"),
  line: builder(line, ["length", "angleInDegrees"], 1, "mean along a line, as moved; angle counter-clockwise"),
  sharpen: builder(sharpen, ["amount", "stencil"], 0, "takes amount times the Laplacian away"),
  unsharp: builder(unsharp, ["sigma", "amount", "radius", "sampling"], 1, "adds amount times the difference from a Gaussian"),
  laplacian: builder(laplacian, ["stencil"], 0, "sum of the second derivatives"),
  laplacianOfGaussian: builder(laplacianOfGaussian, ["sigma", "radius"], 1, "edges and spots of one size"),
  differenceOfGaussians: builder(differenceOfGaussians, ["sigma", "ratio", "radius", "sampling"], 1, "the same, by two bells"),
  sobel: builder(sobel, ["axis"], 1, "slope along x or y; weights 1 2 1 across"),
  prewitt: builder(prewitt, ["axis"], 1, "slope along x or y; weights 1 1 1 across"),
  scharr: builder(scharr, ["axis"], 1, "slope along x or y; weights 3 10 3 across"),
};
