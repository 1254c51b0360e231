/**
 * Operations whose number a method knows exactly and whose price a profile holds, in nanoseconds each; measure/operationWords says what each is.
 *
 *     cost = Σ counts[operation] · nanoseconds[operation]
 */
const names = [
  "run",
  "step",
  "row",
  "enter_u8",
  "enter_u16",
  "enter_f32",
  "leave_u8",
  "leave_u16",
  "leave_f32",
  "haloPixel",
  "alphaPixel",
  "weighedSample",
  "tableSample",
  "curveSample",
  "directTap",
  "directEdgeTap",
  "directLoop",
  "listedTap",
  "listedPair",
  "pairSample",
  "byteResult",
  "keptPixel",
  "pairTap",
  "pairLoop",
  "wordTap",
  "wordSample",
  "pairRowTap",
  "rowTap",
  "rowLoop",
  "columnTap",
  "columnLoop",
  "byteColumnSum",
  "byteRowSum",
  "integerColumnSum",
  "integerSum",
  "floatColumnSum",
  "floatSum",
  "planeSample",
  "columnPass",
  "rowPass",
  "handOver",
  "meeting",
  "handedByte",
  "setup",
  "setupTap",
  "setupByte",
] as const;

export type Operation = (typeof names)[number];

export const operationNames: readonly Operation[] = names;
export type Counts = Partial<Record<Operation, number>>;
export type Prices = Record<Operation, number>;

/** Predicted nanoseconds. */
export function priceOf(counts: Counts, prices: Prices): number {
  let nanoseconds = 0;
  for (const name of operationNames) nanoseconds += (counts[name] ?? 0) * prices[name];
  return nanoseconds;
}
