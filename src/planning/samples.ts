import type { SampleType } from "../types.js";

/** What the planner needs to know of each sample type; `code` is the core's number for it and log₂ of its bytes. */
export const sampleFacts: Record<SampleType, { code: 0 | 1 | 2; full: number; integer: boolean }> = {
  u8: { code: 0, full: 255, integer: true },
  u16: { code: 1, full: 65535, integer: true },
  f32: { code: 2, full: 1, integer: false },
};
