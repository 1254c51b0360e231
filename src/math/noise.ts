/** After so many samples the noise begins again: enough that no row repeats in the first cache. */
const period = 65_521;

/** 2³¹ − 1 */
const modulus = 2_147_483_647;

/**
 * Fills an array with uniform noise between 0 and a full value; the same every time.
 *
 * Source    Park & Miller, Comm. ACM 31: 1192, 1988, with the multiplier of Park, Miller & Stockmeyer, Comm. ACM 36(7): 105, 1993
 */
export function fillWithNoise(data: Uint8Array | Uint8ClampedArray | Uint16Array | Float32Array, full: number): void {
  let state = 1;
  for (let k = 0; k < Math.min(period, data.length); k++) {
    state = (state * 48_271) % modulus;
    data[k] = (state / modulus) * full;
  }
  for (let filled = period; filled < data.length; filled *= 2) data.copyWithin(filled, 0, Math.min(filled, data.length - filled));
}
