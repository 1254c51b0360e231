import { colour, type Colour } from "./colour.js";
import { write } from "./lettering.js";
import { smoothStep } from "./noise.js";
import { lay, type Piece, type Plate } from "./plate.js";

/** Units of the drawing for one millimetre on the sheet. */
export const unitsPerMillimetre = 4;

const ink = colour(0x1d1f22);
const white = colour(0xf6f5f1);

/** A card ruler of 100 mm: ticks each millimetre, longer ones each 5 and 10, a bar of alternate centimetres, six greys. */
export function layScaleBar(plate: Plate, left: number, top: number): void {
  const right = left + 100 * unitsPerMillimetre;
  lay(plate, { ...plain(left - 22, top, right + 30, top + 92, white), shadow: { right: 2, down: 3, softness: 2, strength: 0.4 } });
  for (let millimetre = 0; millimetre <= 100; millimetre += 1) {
    const length = millimetre % 10 === 0 ? 22 : millimetre % 5 === 0 ? 16 : 10;
    const x = left + millimetre * unitsPerMillimetre;
    lay(plate, plain(x - 0.6, top + 8, x + 0.6, top + 8 + length, ink));
    if (millimetre % 20 === 0) write(plate, { text: String(millimetre), x, y: top + 35, height: 10, pen: 1.4, ink, anchor: "middle" });
  }
  write(plate, { text: "mm", x: right + 13, y: top + 16, height: 9, pen: 1.3, ink, anchor: "middle", spacing: 1 });
  for (let centimetre = 0; centimetre < 10; centimetre += 1) {
    const x = left + centimetre * 10 * unitsPerMillimetre;
    lay(plate, plain(x, top + 53, x + 10 * unitsPerMillimetre, top + 60, centimetre % 2 === 0 ? ink : white));
  }
  for (let step = 0; step < 6; step += 1) {
    const grey = 0.02 + 0.7 * (step / 5) ** 2;
    const width = (100 * unitsPerMillimetre) / 6;
    lay(plate, plain(left + step * width, top + 66, left + (step + 1) * width, top + 84, [grey, grey, grey]));
  }
}

/** A flat rectangle with a soft edge. */
function plain(left: number, top: number, right: number, bottom: number, tone: Colour): Piece {
  return {
    left: left - 1,
    top: top - 1,
    right: right + 1,
    bottom: bottom + 1,
    at(x, y) {
      const inside = Math.min(x - left, right - x, y - top, bottom - y);
      return inside <= -0.5 ? undefined : { cover: smoothStep(-0.5, 0.5, inside), colour: tone, relief: 0 };
    },
  };
}
