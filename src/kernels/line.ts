import { rootOfUnity } from "../math/rootsOfUnity.js";
import { allowedTapCount } from "./fromTaps.js";
import { type Kernel, makeKernel } from "./kernel.js";
import { type NumberRange, asOptions, checkOptionNames, checkedNumber } from "./options.js";
import { centreToSumOne } from "./sums.js";

export interface LineOptions {
  /** In samples, above 0, at most 8191. */
  length: number;
  /** Counter-clockwise from the right, as seen: 0 along a row, 90 up a column. @defaultValue 0 */
  angleInDegrees?: number | undefined;
}

const lengthRange: NumberRange = { what: "a number of samples above 0, at most 8191", above: 0, most: 8191 };

/**
 * Motion blur: the mean along a straight line whose middle is the sample.
 *
 *     taps[y, x] = length of the line within |s − x| ≤ ½, |t − y| ≤ ½, over its whole length
 *
 * Accuracy  the sum is 1; the taps are symmetric about the middle to the last bit
 * @param options a bare number is the length, along a row
 * @throws ConvolutionError `unknown-option`, `invalid-number`, `invalid-kernel` (too many taps)
 * Source  common practice (uniform motion during the exposure)
 * @example
 * line({ length: 4 }).taps; // [0.125, 0.25, 0.25, 0.25, 0.125]
 * line({ length: 15, angleInDegrees: 90 }).height; // 15
 */
export function line(options: LineOptions | number): Kernel {
  const given = asOptions<LineOptions>("line", options, "length");
  checkOptionNames("line", given, ["length", "angleInDegrees"]);
  const length = checkedNumber("line", "length", given.length, lengthRange);
  const angle = checkedNumber("line", "angleInDegrees", given.angleInDegrees ?? 0, { what: "a finite number" });
  const direction = rootOfUnity(angle, 360);
  const pieces = piecesOfHalfLine(direction.cosine, -direction.sine, length / 2);
  const reachX = Math.max(...pieces.map(({ x }) => Math.abs(x)));
  const reachY = Math.max(...pieces.map(({ y }) => Math.abs(y)));
  const width = 2 * reachX + 1;
  const taps = new Float64Array(allowedTapCount(width, 2 * reachY + 1));
  const centre = reachY * width + reachX;
  for (const { x, y, part } of pieces) {
    const offset = y * width + x;
    taps[centre + offset] = taps[centre + offset]! + part / length;
    taps[centre - offset] = taps[centre - offset]! + part / length;
  }
  return makeKernel(width, 2 * reachY + 1, centreToSumOne(taps, centre));
}

interface Piece {
  x: number;
  y: number;
  /** Length within the square around (x, y). */
  part: number;
}

/** The line from (0, 0) towards (dx, dy), cut where it passes from square to square. */
function piecesOfHalfLine(dx: number, dy: number, halfLength: number): Piece[] {
  const cuts = [0, halfLength];
  for (const slope of [Math.abs(dx), Math.abs(dy)]) {
    for (let k = 0; (k + 0.5) / slope < halfLength; k++) cuts.push((k + 0.5) / slope);
  }
  cuts.sort((a, b) => a - b);
  const pieces: Piece[] = [];
  for (let k = 1; k < cuts.length; k++) {
    const part = cuts[k]! - cuts[k - 1]!;
    const middle = (cuts[k]! + cuts[k - 1]!) / 2;
    if (part > 0) pieces.push({ x: Math.floor(dx * middle + 0.5), y: Math.floor(dy * middle + 0.5), part });
  }
  return pieces;
}
