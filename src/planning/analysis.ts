import { readTaps, type Kernel } from "../kernels/kernel.js";
import { absoluteSum, separate, type Separation } from "../math/separation.js";

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
  let separation: Separation | undefined;
  const limit = Math.min(mostTerms, kernel.width, kernel.height);
  return {
    sum: kernel.sum,
    absoluteSum: absoluteSum(taps),
    constant: taps.every((tap) => tap === taps[0]),
    integer: taps.every((tap) => Number.isInteger(tap)),
    negative: taps.some((tap) => tap < 0),
    separation: () => (separation ??= separate(taps, kernel.height, kernel.width, limit)),
  };
}
