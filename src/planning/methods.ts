import { direct } from "./direct.js";
import { fft } from "./fft.js";
import type { MethodPlan } from "./method.js";
import { runningSum } from "./runningSum.js";
import { separable } from "./separable.js";

/** Every method there is. A new one is its file and a line here. */
export const methods: readonly MethodPlan[] = [direct, separable, runningSum, fft];
