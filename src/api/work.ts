import type { Kernel } from "../kernels/index.js";
import { divisionOf } from "../planning/bands.js";
import type { Prices } from "../planning/cost.js";
import type { Work } from "../planning/method.js";
import { variantFor } from "../planning/methods.js";
import { panelsOf } from "../planning/panels.js";
import { problemOf, type Crew } from "../planning/problem.js";
import type { Build, Layout, Method, PrepareOptions } from "../types.js";
import { checkedLayout, checkedRequest } from "./validate/request.js";

/**
 * Operation counts of one method for a problem, for fitting prices to measured runs. Nothing where the method does not apply.
 *
 * @param team threads that may work on it, and the prices that decide how many do; one thread where absent
 * @throws ConvolutionError those of `prepare`
 */
export function workOf(
  method: Method,
  build: Build,
  kernel: Kernel,
  layout: Layout,
  options?: PrepareOptions,
  team?: { crew: Crew; prices: Prices },
): Work | undefined {
  const problem = problemOf(checkedRequest("work", kernel, checkedLayout("work", layout), options), build, Infinity, team?.crew);
  const plan = variantFor(method, problem);
  if (plan.applicable(problem) !== true) return undefined;
  return team ? divisionOf(plan, problem, team.prices).work : panelsOf(plan, problem).work;
}
