import { colour, dimmed } from "./colour.js";
import { write } from "./lettering.js";
import { layeredNoise, smoothStep } from "./noise.js";
import { lay, type Piece, type Plate } from "./plate.js";

/** A rectangle in units. */
export interface Box {
  left: number;
  top: number;
  right: number;
  bottom: number;
}

export const labelBox: Box = { left: 1080, top: 868, right: 1532, bottom: 1132 };

const card = colour(0xf8f3e4);
const print = colour(0x22262a);
const hand = colour(0x18294a);
const stampRed = colour(0x9c2f27);

/** The herbarium's label: printed heading, handwritten entries. Institution, people, places and numbers are invented. */
export function layLabel(plate: Plate): void {
  lay(plate, cardPiece(labelBox));
  const { left, top, right } = labelBox;
  const middle = (left + right) / 2;
  write(plate, { text: "HERBARIUM OF VELLMARSH", x: middle, y: top + 22, height: 17, pen: 2.1, ink: print, anchor: "middle", spacing: 2.1 });
  write(plate, { text: "PRESSED LEAVES OF THE LOWER FEN", x: middle, y: top + 52, height: 9.5, pen: 1.25, ink: print, anchor: "middle", spacing: 1.9 });
  lay(plate, rule(left + 22, right - 22, top + 72, 1.2));
  const entries = [
    ["No.", "VLM 004127"],
    ["Name", "Folium fictum var. serratum"],
    ["Place", "Sallow hedge, Old Withy Drove"],
    ["Found", "14 June, in damp shade, 2 m"],
    ["Leg.", "Odda Brandlow    Det. I. Thorrel"],
  ];
  entries.forEach(([heading, entry], row) => {
    const y = top + 85 + 33.5 * row;
    write(plate, { text: heading, x: left + 24, y: y + 5, height: 9, pen: 1.15, ink: print });
    write(plate, { text: entry, x: left + 76, y, height: 15, pen: 1.7, ink: hand, slant: 0.14, spacing: 1.35 });
    lay(plate, rule(left + 74, right - 22, y + 22.5, 0.7));
  });
}

/** A round ink stamp with the sheet's number of the press. */
export function layStamp(plate: Plate, x: number, y: number): void {
  for (const radius of [44, 38]) lay(plate, ring(x, y, radius));
  write(plate, { text: "VLM", x, y: y - 19, height: 14, pen: 2.2, ink: stampRed, anchor: "middle" });
  write(plate, { text: "PRESS 7", x, y: y + 6, height: 9.5, pen: 1.7, ink: stampRed, anchor: "middle" });
}

function cardPiece(box: Box): Piece {
  return {
    ...box,
    shadow: { right: 2, down: 3, softness: 2, strength: 0.4 },
    at(x, y) {
      const inside = Math.min(x - box.left, box.right - x, y - box.top, box.bottom - y);
      if (inside <= -0.5) return undefined;
      const frame = smoothStep(1.4, 0.4, Math.abs(inside - 11));
      const tone = 0.97 + 0.05 * layeredNoise(x / 2, y / 2, 2, 61) - 0.04 * layeredNoise(x / 120, y / 90, 2, 67);
      return { cover: smoothStep(-0.5, 0.5, inside), colour: dimmed(card, tone * (1 - 0.62 * frame)), relief: 0.9 * smoothStep(0, 1.5, inside) };
    },
  };
}

function rule(left: number, right: number, y: number, thickness: number): Piece {
  return {
    left,
    right,
    top: y - thickness,
    bottom: y + thickness,
    at(x, at) {
      const cover = Math.min(1, Math.max(0, thickness / 2 + 0.5 - Math.abs(at - y))) * 0.8;
      return cover <= 0 || x < left || x > right ? undefined : { cover, colour: print, relief: 0 };
    },
  };
}

function ring(x: number, y: number, radius: number): Piece {
  return {
    left: x - radius - 2,
    right: x + radius + 2,
    top: y - radius - 2,
    bottom: y + radius + 2,
    at(atX, atY) {
      const gap = Math.abs(Math.sqrt((atX - x) ** 2 + (atY - y) ** 2) - radius);
      const ink = smoothStep(1.7, 0.7, gap) * (0.55 + 0.6 * layeredNoise(atX / 5, atY / 5, 3, 71));
      return ink <= 0 ? undefined : { cover: Math.min(0.9, ink), colour: stampRed, relief: 0 };
    },
  };
}
