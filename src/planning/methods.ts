import type { Method } from "../types.js";
import { direct, directSparse } from "./direct.js";
import { directBytes, directBytesSparse } from "./directBytes.js";
import { fft } from "./fft.js";
import type { MethodPlan } from "./method.js";
import type { Problem } from "./problem.js";
import { runningSum } from "./runningSum.js";
import { runningSumBytes } from "./runningSumBytes.js";
import { separable } from "./separable.js";
import { separableBytes } from "./separableBytes.js";

/**
 * Every way to compute that there is: a line each. Several may be variants of one method, the preferred one first: the first that applies
 * stands for the method, whatever the profile, so that a forced method's arithmetic is the same everywhere.
 */
export const methods: readonly MethodPlan[] = [
  directBytesSparse,
  directBytes,
  directSparse,
  direct,
  separableBytes,
  separable,
  runningSumBytes,
  runningSum,
  fft,
];

export const methodNames: readonly Method[] = [...new Set(methods.map(({ name }) => name))];

/** The variant that stands for a method; where none applies the last one, which tells why. */
export function variantFor(name: Method, problem: Problem): MethodPlan {
  const { variant } = problem.request;
  const variants = methods.filter((plan) => plan.name === name && (variant === undefined || plan.variant === variant));
  return variants.find((plan) => plan.applicable(problem) === true) ?? variants.at(-1) ?? methods.find((plan) => plan.name === name)!;
}
