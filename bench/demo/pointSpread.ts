import { kernel, normalised, type Kernel } from "../../src/index.js";
import { layeredNoise, smoothStep } from "./sheet/noise.js";

/** Taps in each direction. */
export const pointSpreadWidth = 65;

/** A place on the sensor, in taps from the upper left. */
interface Place {
  x: number;
  y: number;
}

/** How long the picture of the point stood where, while the shutter was open: a short hooked path. */
const shake: readonly (Place & { dwell: number })[] = [
  { x: 0, y: 0, dwell: 2.4 },
  { x: 1.2, y: 2.2, dwell: 0.5 },
  { x: 2.2, y: 4.6, dwell: 0.45 },
  { x: 3.4, y: 7, dwell: 0.4 },
  { x: 5.2, y: 9, dwell: 0.4 },
  { x: 7.6, y: 10.2, dwell: 0.5 },
  { x: 10.2, y: 10.4, dwell: 0.8 },
  { x: 12.2, y: 9.4, dwell: 1.3 },
];

/**
 * The picture of one point of light by an old bellows lens: a defocused, clipped disc with a bright rim, a lopsided coma
 * tail, smeared by a shaking copy stand, broken up by speckle, over a faint veil of scattered light. Every tap is positive
 * and the taps sum to 1. It is drawn by code, and made such that no few rows and columns multiply to it.
 */
export function pointSpread(): Kernel {
  const rows = Array.from({ length: pointSpreadWidth }, (_, y) => Array.from({ length: pointSpreadWidth }, (_unused, x) => lightAt(x, y)));
  return normalised(kernel(rows));
}

function lightAt(x: number, y: number): number {
  let light = 0;
  for (const stop of shake) light += stop.dwell * lensAt(x - 20 - stop.x, y - 35 - stop.y);
  const speckle = 0.25 + 1.5 * layeredNoise(x / 1.7, y / 1.7, 2, 137) ** 1.6;
  const veil = 0.006 / (1 + ((x - 32) ** 2 + (y - 32) ** 2) / 90);
  return light * speckle + veil;
}

/** The lens alone, standing still, around its chief ray. */
function lensAt(x: number, y: number): number {
  return disc(x, y) + tail(x, y);
}

/** Defocus: a disc of 8 taps' radius, brighter at its rim, clipped on one side by the lens barrel. */
function disc(x: number, y: number): number {
  const radius = Math.sqrt(x * x + y * y);
  const barrel = Math.sqrt((x - 4) ** 2 + (y + 3) ** 2);
  const rim = 1 + 2.2 * smoothStep(4.5, 7.6, radius);
  return 0.3 * rim * smoothStep(8.6, 7.6, radius) * smoothStep(11.4, 10, barrel);
}

/** Coma: ever wider, ever fainter circles that march off to the upper right. */
function tail(x: number, y: number): number {
  let light = 0;
  for (let circle = 1; circle <= 14; circle += 1) {
    const radius = 1 + 0.42 * circle;
    const distance = Math.sqrt((x - 1.5 * circle) ** 2 + (y + 1.35 * circle) ** 2);
    light += (0.8 / (radius * radius)) * smoothStep(radius + 0.8, radius - 0.8, distance) * (1.1 + 0.5 * smoothStep(radius - 2, radius, distance));
  }
  return light;
}
