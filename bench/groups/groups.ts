import { direct, separable } from "./floats.js";
import type { Group } from "./group.js";

/** Every group of lines, in the order in which they are printed. */
export const groups: readonly Group[] = [direct, separable];
