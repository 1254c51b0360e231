import { box } from "./box.js";
import { bytes } from "./bytes.js";
import { denormals } from "./denormals.js";
import { fft } from "./fft.js";
import { direct, separable } from "./floats.js";
import { others } from "./others.js";
import { large } from "./large.js";
import { replace } from "./replace.js";
import { small } from "./small.js";
import type { Group } from "./group.js";
import { transforms } from "./transforms.js";

/** Every group of lines, in the order in which they are printed. */
export const groups: readonly Group[] = [direct, separable, transforms, fft, bytes, box, denormals, small, replace, large, others];
