import { type Kernel, binomial, box, delta } from "../index.js";

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
  delta: builder(delta, ["width", "height"], 0, "a single 1: leaves the image as it is, or shifts it"),
  box: builder(box, ["width", "height"], 1, "mean of a rectangle"),
  binomial: builder(binomial, ["order"], 1, "rows of Pascal's triangle, order + 1 taps wide"),
};
