import { compensatedSum } from "../math/compensatedSum.js";

/**
 * Moves the tap at `centre` so that the taps sum to 1, as far as that tap's own last bit allows; changes `taps`.
 * The others keep their bits and therefore their symmetry.
 *
 * Accuracy  |Σ − 1| ≤ ½ ulp(taps[centre]): the sum rounds to 1 where that tap is at most ½, and else is within 1 ulp
 * Requires  the taps nearly sum to 1
 */
export function centreToSumOne(taps: Float64Array<ArrayBuffer>, centre: number): Float64Array<ArrayBuffer> {
  const parts = new Float64Array(taps.length + 1);
  parts.set(taps);
  parts[taps.length] = -1;
  for (let attempt = 0; attempt < 4; attempt++) {
    const excess = compensatedSum(parts);
    const moved = taps[centre]! - excess;
    if (moved === taps[centre]) break;
    parts[centre] = taps[centre] = moved;
  }
  return taps;
}

/**
 * Makes the taps sum to exactly 0, in whatever order they are added; changes `taps`.
 *
 * Every tap is rounded to a multiple of a power of two so coarse that each partial sum is representable, and the
 * centre becomes minus the sum of the others. The other taps keep their symmetry.
 *
 * Accuracy  each tap but the centre is moved by at most 2⁻⁵² · Σ|taps|
 */
export function centreToSumZero(taps: Float64Array<ArrayBuffer>, centre: number): Float64Array<ArrayBuffer> {
  let weight = 0;
  for (const tap of taps) weight += Math.abs(tap);
  if (weight === 0) return taps;
  let unit = 1;
  while (unit * 9007199254740992 < weight * 4) unit *= 2;
  while (unit * 9007199254740992 >= weight * 8) unit *= 0.5;
  let others = 0;
  for (let k = 0; k < taps.length; k++) {
    if (k === centre) continue;
    taps[k] = Math.floor(taps[k]! / unit + 0.5) * unit;
    others += taps[k]!;
  }
  taps[centre] = -others;
  return taps;
}
