import { noise } from "../../test/support/noise.js";

/** A number in 0…1, without 1, another one at each call. */
export type Draw = () => number;

/**
 * A whole number with its bits mixed, so that neighbours have nothing in common.
 *
 * Source    Appleby, MurmurHash3, the finaliser fmix32 (public domain)
 */
function mixed(value: number): number {
  let bits = value;
  bits = Math.imul(bits ^ (bits >>> 16), 0x85ebca6b);
  bits = Math.imul(bits ^ (bits >>> 13), 0xc2b2ae35);
  return (bits ^ (bits >>> 16)) >>> 0;
}

/** Draws for one problem, the same for the same seed and index whatever was drawn for others. */
export const drawsOf = (seed: number, index: number): Draw => noise(mixed(seed * 65_536 + index + 1));

export const oneOf = <T>(draw: Draw, values: readonly T[]): T => values[Math.floor(draw() * values.length)]!;

/** low · (high / low)^draw, not rounded: as many small values as large ones. */
export const spreadEvenly = (draw: Draw, low: number, high: number): number => low * (high / low) ** draw();

/** A whole number in low…high. */
export const wholeNumber = (draw: Draw, low: number, high: number): number => low + Math.floor(draw() * (high - low + 1));
