import type { HardwareProfile } from "../types.js";
import { scalarProfile } from "./scalarProfile.js";
import { simdProfile } from "./simdProfile.js";

/** All that are shipped. Engines load the one of their build: the scalar one is no part of what a page loads that has SIMD. */
export const shippedProfiles: readonly HardwareProfile[] = [simdProfile, scalarProfile];
