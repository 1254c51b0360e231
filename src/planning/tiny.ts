/**
 * 2⁻¹⁰⁰: what contributes less, as a part of the full value, is taken as 0. Products of denormal floats take a hundred times as long as others,
 * and WebAssembly cannot have them flushed; samples of floats are held to the same limit as they enter (the core's enter).
 */
export const tiny = 7.888609052210118e-31;

function largest(taps: Float64Array): number {
  let most = 0;
  for (const tap of taps) most = Math.max(most, Math.abs(tap));
  return most;
}

function weight(taps: Float64Array): number {
  let sum = 0;
  for (const tap of taps) sum += Math.abs(tap);
  return sum;
}

/** A tap is kept where it is no less than this: next to nothing beside a whole, and beside the largest tap. */
function leastKept(taps: Float64Array, factor: number): number {
  return Math.min(tiny / factor, tiny * largest(taps));
}

/** Taps in single precision, those that weigh next to nothing as 0. `factor` is the largest tap along the other axis of a separable term. */
export function keptFloats(taps: Float64Array, factor = 1): Float32Array<ArrayBuffer> {
  const least = leastKept(taps, factor);
  const floats = new Float32Array(taps);
  for (let k = 0; k < taps.length; k++) if (Math.abs(taps[k]!) < least) floats[k] = 0;
  return floats;
}

/** How many of them are not 0. */
export function keptCount(taps: Float64Array): number {
  const least = leastKept(taps, 1);
  let count = 0;
  for (let k = 0; k < taps.length; k++) if (Math.abs(taps[k]!) >= least && Math.fround(taps[k]!) !== 0) count++;
  return count;
}

/** Σ|taps that become 0| */
export function weightLeftOut(taps: Float64Array, factor = 1): number {
  const least = leastKept(taps, factor);
  let sum = 0;
  for (const tap of taps) if (Math.abs(tap) < least) sum += Math.abs(tap);
  return sum;
}

/** The same of both vectors of a separable term, as taps of the whole. */
export function termLeftOut(column: Float64Array, row: Float64Array): number {
  return weightLeftOut(column, largest(row)) * weight(row) + weightLeftOut(row, largest(column)) * weight(column);
}

/** A vector of a separable term in single precision, beside the other one. */
export function floatVector(taps: Float64Array, other: Float64Array): Float32Array<ArrayBuffer> {
  return keptFloats(taps, largest(other));
}
