import { encoded } from "./colour.js";
import type { Plate } from "./plate.js";
import { randomFrom } from "./random.js";

/**
 * Lights the plate by a soft lamp from above left and writes it as RGB bytes: slopes towards the lamp are brighter,
 * light falls off to the far corner, and the sensor adds a little noise.
 */
export function photographed(plate: Plate): Uint8Array {
  const bytes = new Uint8Array(plate.width * plate.height * 3);
  const random = randomFrom(90210);
  const curve = Float32Array.from({ length: 4097 }, (_, step) => 255 * encoded(step / 4096));
  for (let row = 0; row < plate.height; row += 1) {
    for (let column = 0; column < plate.width; column += 1) {
      const index = row * plate.width + column;
      const slope = slopeTowardsLamp(plate, row, column);
      const fallOff = 1.06 - 0.16 * Math.sqrt((column / plate.width - 0.3) ** 2 + ((row / plate.height - 0.25) * 0.75) ** 2);
      const shade = Math.min(1.35, Math.max(0.55, 1 + 0.3 * slope)) * fallOff;
      for (let channel = 0; channel < 3; channel += 1) {
        const light = Math.min(4096, Math.max(0, Math.round(4096 * plate.light[3 * index + channel] * shade)));
        const noise = (random.next() + random.next() - 1) * 2.2;
        bytes[3 * index + channel] = Math.min(255, Math.max(0, Math.round(curve[light] + noise)));
      }
    }
  }
  return bytes;
}

/** Rise of the surface, in units of height for each unit of way, going away from the lamp at the upper left. */
function slopeTowardsLamp(plate: Plate, row: number, column: number): number {
  const left = plate.relief[row * plate.width + Math.max(0, column - 1)];
  const right = plate.relief[row * plate.width + Math.min(plate.width - 1, column + 1)];
  const above = plate.relief[Math.max(0, row - 1) * plate.width + column];
  const below = plate.relief[Math.min(plate.height - 1, row + 1) * plate.width + column];
  return ((right - left) * 0.6 + (below - above) * 0.8) * 0.5 * plate.scale;
}
