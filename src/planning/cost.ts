/**
 * Operations whose number a method knows exactly and whose price a profile holds, in nanoseconds each.
 *
 *     cost = Σ counts[operation] · nanoseconds[operation]
 */
export const operations = {
  run: "one run: the call from JavaScript and back",
  step: "one call into the core",
  row: "one result row: its loops and pointers",
  enter_u8: "one 8-bit sample widened and staged",
  enter_u16: "one 16-bit sample widened and staged",
  enter_f32: "one float staged",
  leave_u8: "one 8-bit sample rounded and taken out",
  leave_u16: "one 16-bit sample rounded and taken out",
  leave_f32: "one float taken out",
  haloPixel: "one pixel gathered outside the image",
  alphaPixel: "one pixel premultiplied, or divided by its alpha",
  weighedSample: "one result divided by the weight inside the image",
  tableSample: "one sample decoded by a table",
  curveSample: "one sample decoded or encoded by the sRGB curve",
  directTap: "one multiply–add of the direct method, in a row that serves two result rows",
  directEdgeTap: "one multiply–add of the direct method, in a row that serves one",
  directLoop: "one row of taps over one block of two result rows",
  listedTap: "one multiply–add of a kernel that is gone through by a list",
  listedPair: "one product of two bytes and two taps of a list",
  pairSample: "one byte staged and paired with the row above or below",
  byteResult: "one byte taken out that was summed in fixed point",
  keptPixel: "one pixel whose alpha is kept beside bytes",
  pairTap: "one product of two bytes and two taps, directly",
  pairLoop: "one row of taps over one block of two rows of bytes",
  wordTap: "one product of two bytes and two taps down a column",
  wordSample: "one column sum of bytes, rounded and paired with its neighbour",
  pairRowTap: "one product of two column sums and two taps along a row",
  rowTap: "one multiply–add along a row",
  rowLoop: "one block of a row pass",
  columnTap: "one multiply–add down a column",
  columnLoop: "one block of two result rows of a column pass",
  byteColumnSum: "one byte added to the running sum of its column, and one subtracted",
  byteRowSum: "one column sum added to a running sum along the row, or one byte made of it",
  integerColumnSum: "one sample added to the running sum of its column, and one subtracted",
  integerSum: "one step of a running sum of integers along a row",
  floatColumnSum: "one sum over a block of a row added to those over blocks of a column",
  floatSum: "one step of sums over blocks along a row",
  planeSample: "one float spread over the planes or gathered from them",
  columnPass: "one point of a column transform: see planning/tiles for its weight",
  rowPass: "one point of a row transform, spectrum and turning included",
  handOver: "one call to another thread, and its answer",
  meeting: "one point where all threads wait for each other",
  handedByte: "one byte copied for another thread",
  setup: "one preparation",
  setupTap: "one tap analysed and stored",
  setupByte: "one byte of tables and scratch made ready",
} as const;

export type Operation = keyof typeof operations;
export type Counts = Partial<Record<Operation, number>>;
export type Prices = Record<Operation, number>;

export const operationNames = Object.keys(operations) as Operation[];

/** Predicted nanoseconds. */
export function priceOf(counts: Counts, prices: Prices): number {
  let nanoseconds = 0;
  for (const name of operationNames) nanoseconds += (counts[name] ?? 0) * prices[name];
  return nanoseconds;
}
