import type { Operation } from "../planning/cost.js";

/**
 * Operations that do similar work: on another machine their prices move together more than those of different groups. A price that a
 * measurement says little about follows its group, a group all prices.
 */
export const groups: readonly (readonly Operation[])[] = [
  ["run", "step", "row", "haloPixel", "keptPixel"],
  ["enter_u8", "enter_u16", "enter_f32", "leave_u8", "leave_u16", "leave_f32", "alphaPixel", "weighedSample", "tableSample", "curveSample"],
  ["directTap", "directEdgeTap", "directLoop", "listedTap", "rowTap", "rowLoop", "columnTap", "columnLoop"],
  ["listedPair", "pairSample", "byteResult", "pairTap", "pairLoop", "wordTap", "wordSample", "pairRowTap"],
  ["byteColumnSum", "byteRowSum", "integerColumnSum", "integerSum", "floatColumnSum", "floatSum"],
  ["planeSample", "columnPass", "rowPass"],
  ["handOver", "meeting", "handedByte"],
  ["setup", "setupTap", "setupByte"],
];
