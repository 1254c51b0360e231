import { readTaps, type Kernel } from "../kernels/kernel.js";
import { absoluteSum, leastLeftBy, separate, type Separation } from "../math/separation.js";
import { keptCount, weightLeftOut } from "./tiny.js";

/** More separable terms than this are not looked for: they would not pay, and looking takes time. */
export const mostTerms = 16;

/** What is known of a kernel, whatever image it meets. Found once per kernel value. */
export interface KernelAnalysis {
  sum: number;
  absoluteSum: number;
  /** All taps are the same number. */
  constant: boolean;
  /** All taps are integers. */
  integer: boolean;
  negative: boolean;
  /** Σ|taps that weigh next to nothing|: see planning/tiny. */
  leftOut(): number;
  /** Taps that are not next to nothing: see planning/tiny. */
  kept(): number;
  /** What any sum of the most terms would leave of the taps at least, Σ|taps|: a quick look before terms are looked for. */
  leastLeft(): number;
  /** Separable terms, found when first asked for. */
  separation(): Separation;
}

const known = new WeakMap<Kernel, KernelAnalysis>();

export function analyse(kernel: Kernel): KernelAnalysis {
  let analysis = known.get(kernel);
  if (!analysis) known.set(kernel, (analysis = analyseTaps(kernel)));
  return analysis;
}

function analyseTaps(kernel: Kernel): KernelAnalysis {
  const taps = readTaps(kernel);
  const [first] = taps;
  let [constant, integer, negative] = [true, true, false];
  for (const tap of taps) {
    constant &&= tap === first;
    integer &&= Number.isInteger(tap);
    negative ||= tap < 0;
  }
  let separation: Separation | undefined;
  let leftOut: number | undefined;
  let kept: number | undefined;
  let leastLeft: number | undefined;
  const limit = Math.min(mostTerms, kernel.width, kernel.height);
  return {
    sum: kernel.sum,
    absoluteSum: absoluteSum(taps),
    constant,
    integer,
    negative,
    kept: () => (kept ??= keptCount(taps)),
    leftOut: () => (leftOut ??= weightLeftOut(taps)),
    leastLeft: () => (leastLeft ??= leastLeftBy(mostTerms, taps, kernel.height, kernel.width)),
    separation: () => (separation ??= separate(taps, kernel.height, kernel.width, limit)),
  };
}
