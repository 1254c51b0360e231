import type { Build, Kernel, Method } from "../../src/index.js";
import { workOf } from "../../src/api/work.js";
import type { Work } from "../../src/planning/method.js";
import { methodNames } from "../../src/planning/methods.js";
import type { Question } from "./problems.js";

/** The methods that apply to a question, with what they count. */
export function worksOf({ layout, options }: Question, kernel: Kernel, build: Build): { method: Method; work: Work }[] {
  return methodNames.flatMap((name) => {
    const work = workOf(name, build, kernel, layout, options);
    return work === undefined ? [] : [{ method: name, work }];
  });
}
