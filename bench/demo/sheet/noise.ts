import { latticeValue } from "./random.js";

/** 3t² − 2t³ of x between two edges, 0 below and 1 above. */
export function smoothStep(low: number, high: number, x: number): number {
  const t = Math.min(1, Math.max(0, (x - low) / (high - low)));
  return t * t * (3 - 2 * t);
}

export function mix(from: number, to: number, share: number): number {
  return from + (to - from) * share;
}

/** Lattice noise 0…1: values of the grid's corners, blended smoothly between them. */
export function valueNoise(x: number, y: number, startValue: number): number {
  const column = Math.floor(x);
  const row = Math.floor(y);
  const u = smoothStep(0, 1, x - column);
  const v = smoothStep(0, 1, y - row);
  const above = mix(latticeValue(column, row, startValue), latticeValue(column + 1, row, startValue), u);
  const below = mix(latticeValue(column, row + 1, startValue), latticeValue(column + 1, row + 1, startValue), u);
  return mix(above, below, v);
}

/** Octaves of lattice noise, each twice as fine and half as strong; 0…1. */
export function layeredNoise(x: number, y: number, octaves: number, startValue: number): number {
  let sum = 0;
  let weight = 0;
  for (let octave = 0; octave < octaves; octave += 1) {
    const fineness = 1 << octave;
    sum += valueNoise(x * fineness, y * fineness, startValue + octave * 101) / fineness;
    weight += 1 / fineness;
  }
  return sum / weight;
}

/**
 * Distance to the nearest wall of a random cell pattern: second nearest minus nearest cell point, 0 on a wall.
 * This is the net of the finest veins.
 *
 * Source: Worley, "A cellular texture basis function", SIGGRAPH 1996
 */
export function cellWallDistance(x: number, y: number, startValue: number): number {
  const column = Math.floor(x);
  const row = Math.floor(y);
  let nearest = 9;
  let second = 9;
  for (let dy = -1; dy <= 1; dy += 1) {
    for (let dx = -1; dx <= 1; dx += 1) {
      const pointX = column + dx + 0.15 + 0.7 * latticeValue(column + dx, row + dy, startValue);
      const pointY = row + dy + 0.15 + 0.7 * latticeValue(column + dx, row + dy, startValue + 1);
      const distance = Math.sqrt((pointX - x) ** 2 + (pointY - y) ** 2);
      if (distance < nearest) {
        second = nearest;
        nearest = distance;
      } else if (distance < second) second = distance;
    }
  }
  return second - nearest;
}
