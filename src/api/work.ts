import type { Kernel } from "../kernels/index.js";
import type { Work } from "../planning/method.js";
import { variantFor } from "../planning/methods.js";
import { problemOf } from "../planning/problem.js";
import type { Build, Layout, Method, PrepareOptions } from "../types.js";
import { checkedLayout, checkedRequest } from "./validate/request.js";

/**
 * Operation counts of one method for a problem, for fitting prices to measured runs. Nothing where the method does not apply.
 *
 * @throws ConvolutionError those of `prepare`
 */
export function workOf(method: Method, build: Build, kernel: Kernel, layout: Layout, options?: PrepareOptions): Work | undefined {
  const problem = problemOf(checkedRequest("work", kernel, checkedLayout("work", layout), options), build, Infinity);
  const plan = variantFor(method, problem);
  return plan.applicable(problem) === true ? plan.work(problem) : undefined;
}
