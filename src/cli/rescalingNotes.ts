import type { SampleType } from "../index.js";

/** A change of depth leaves the numbers as they are, which is seldom what a newcomer expects. */
export function rescalingNotes(from: SampleType, to: SampleType, gain: number | undefined): string[] {
  if (from === to || gain !== undefined) return [];
  if (to === "u8") return ["16-bit values were written to 8 bits as they are, 255 at most: --gain 1/257 maps the whole range."];
  return ["8-bit values were written to 16 bits as they are, which looks black: --gain 257 maps the whole range."];
}
