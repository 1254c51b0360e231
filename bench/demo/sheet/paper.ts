import { blend, colour, dimmed, type Colour } from "./colour.js";
import { layeredNoise, smoothStep, valueNoise } from "./noise.js";
import { lay, type Plate } from "./plate.js";
import { randomFrom } from "./random.js";

const cream = colour(0xf1ead8);
const aged = colour(0xe2d3b0);
const foxing = colour(0xb48a55);
const copyStand = colour(0x34373a);

/** The mounting sheet's place on the copy stand, in units. */
export const sheetEdges = { left: 26, top: 24, right: 1574, bottom: 1176 };

/** Fills the plate with the dark copy stand and the cream sheet on it: cotton fibres, cloudy tone, foxing, an aged rim. */
export function layPaper(plate: Plate): void {
  for (let row = 0; row < plate.height; row += 1) {
    for (let column = 0; column < plate.width; column += 1) {
      const x = (column + 0.5) / plate.scale;
      const y = (row + 0.5) / plate.scale;
      const index = row * plate.width + column;
      const inside = Math.min(x - sheetEdges.left, sheetEdges.right - x, y - sheetEdges.top, sheetEdges.bottom - y) + 1.2 * (valueNoise(x / 9, y / 9, 5) - 0.5);
      const sheetShare = smoothStep(-0.7, 0.7, inside);
      const stand = sheetShare === 1 ? copyStand : dimmed(copyStand, (0.75 + 0.5 * valueNoise(x * 0.9, y * 0.9, 77)) * (1 - 0.55 * smoothStep(14, 0, -inside)));
      const paper = blend(stand, paperColour(x, y, inside), sheetShare);
      plate.light.set(paper, 3 * index);
      plate.relief[index] = sheetShare * (0.5 + 0.34 * layeredNoise(x / 3.1, y / 2.6, 3, 11) + 0.9 * layeredNoise(x / 90, y / 90, 2, 19));
    }
  }
  layFoxing(plate);
  layFibres(plate);
}

function paperColour(x: number, y: number, inside: number): Colour {
  const clouds = layeredNoise(x / 240, y / 240, 4, 23);
  const grain = 0.965 + 0.07 * layeredNoise(x / 1.7, y / 1.7, 2, 31);
  return dimmed(blend(cream, aged, 0.55 * smoothStep(0.35, 0.8, clouds) + 0.5 * smoothStep(70, 0, inside)), grain);
}

/** Brown age spots with ragged edges. */
function layFoxing(plate: Plate): void {
  const random = randomFrom(1201);
  for (let spot = 0; spot < 46; spot += 1) {
    const [x, y] = [random.between(40, 1560), random.between(40, 1160)];
    const radius = random.between(2, 9) + (random.next() < 0.1 ? 10 : 0);
    lay(plate, {
      left: x - radius,
      right: x + radius,
      top: y - radius,
      bottom: y + radius,
      at(atX, atY) {
        const ragged = Math.sqrt((atX - x) ** 2 + (atY - y) ** 2) + radius * 0.5 * (valueNoise(atX / 4, atY / 4, 41) - 0.3);
        return ragged >= radius ? undefined : { cover: 0.32 * smoothStep(radius, 0, ragged), colour: foxing, relief: 0 };
      },
    });
  }
}

/** Short curved cotton fibres, a little lighter or darker than the sheet. */
function layFibres(plate: Plate): void {
  const random = randomFrom(4057);
  for (let fibre = 0; fibre < 2600; fibre += 1) {
    let x = random.between(sheetEdges.left + 4, sheetEdges.right - 4);
    let y = random.between(sheetEdges.top + 4, sheetEdges.bottom - 4);
    let angle = random.between(0, 2 * Math.PI);
    const turn = random.between(-0.09, 0.09);
    const gain = random.next() < 0.62 ? random.between(0.84, 0.95) : random.between(1.02, 1.08);
    const steps = Math.round(random.between(8, 34));
    for (let step = 0; step < steps; step += 1) {
      const index = Math.floor(y * plate.scale) * plate.width + Math.floor(x * plate.scale);
      if (index >= 0 && index < plate.relief.length) {
        for (let channel = 0; channel < 3; channel += 1) plate.light[3 * index + channel] *= gain;
        plate.relief[index] += 0.16;
      }
      x += Math.cos(angle);
      y += Math.sin(angle);
      angle += turn;
    }
  }
}
