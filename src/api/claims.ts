import { ConvolutionError } from "../errors.js";
import type { EngineMemory } from "../runtime/memory.js";
import type { Samples } from "../types.js";

/** Bytes first … end − 1 of a buffer, or of an engine's memory, whose buffer changes as it grows. */
export interface Stretch {
  of: object;
  first: number;
  end: number;
}

export function samplesStretch(samples: Samples, memory: EngineMemory): Stretch {
  const { buffer, byteOffset, byteLength } = samples;
  const of = memory.addressOf(samples) === undefined ? buffer : memory;
  return { of, first: byteOffset, end: byteOffset + byteLength };
}

function overlap(a: Stretch, b: Stretch): boolean {
  return a.of === b.of && a.first < b.end && b.first < a.end;
}

/** The same of two arrays. */
export function samplesOverlap(a: Samples, b: Samples, memory: EngineMemory): boolean {
  if (a.buffer !== b.buffer && (memory.addressOf(a) === undefined || memory.addressOf(b) === undefined)) return false;
  return a.byteOffset < b.byteOffset + b.byteLength && b.byteOffset < a.byteOffset + a.byteLength;
}

/** What a job reads and writes until it ends. `owner` is its filter, whose jobs follow one another. */
export interface Claim {
  owner: object;
  source: Stretch;
  target: Stretch | undefined;
}

/** Claims of unfinished jobs, of all engines: arrays belong to nobody. */
const claims = new Set<Claim>();

/** False while no job is unfinished, so that nothing needs to be compared. */
export function anyClaims(): boolean {
  return claims.size > 0;
}

interface Waiting {
  stretch: Stretch;
  act: () => void;
}

/** What has to wait until no job needs its stretch. */
const waiting = new Set<Waiting>();

function inUse(found: string): ConvolutionError {
  const message = `An unfinished runAsync ${found}. Give an array of its own, or wait until that run is over.`;
  return new ConvolutionError("array-in-use", message, { expected: "an array that no unfinished run needs", received: found });
}

/**
 * Makes sure that no unfinished job writes what this one reads or writes, or reads what it writes. A filter's jobs come one after the other, so what an
 * earlier one of the same filter writes may be read.
 *
 * @throws ConvolutionError `array-in-use`
 */
export function checkUnclaimed({ owner, source, target }: Claim): void {
  for (const other of claims) {
    if (target && other.target && overlap(target, other.target)) throw inUse("writes to the same target");
    if (target && overlap(target, other.source)) throw inUse("reads its image from where the target lies");
    if (owner !== other.owner && other.target && overlap(source, other.target)) throw inUse("writes its results where the image lies");
  }
}

/** @throws ConvolutionError `array-in-use` */
export function claim(claimed: Claim): void {
  checkUnclaimed(claimed);
  claims.add(claimed);
}

export function unclaim(claimed: Claim): void {
  claims.delete(claimed);
  const all = [...waiting];
  waiting.clear();
  for (const { stretch, act } of all) whenUnclaimed(stretch, act);
}

/** Acts at once where no unfinished job needs the stretch, else as soon as none does. */
export function whenUnclaimed(stretch: Stretch, act: () => void): void {
  for (const { source, target } of claims) {
    if (!overlap(stretch, source) && !(target && overlap(stretch, target))) continue;
    waiting.add({ stretch, act });
    return;
  }
  act();
}
