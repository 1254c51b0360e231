import { colour, dimmed } from "./colour.js";
import { smoothStep, valueNoise } from "./noise.js";
import type { Piece } from "./plate.js";

/** A strip of linen tape: its middle, length and width in units, angle in radians. */
export interface Tape {
  x: number;
  y: number;
  length: number;
  width: number;
  angle: number;
  startValue: number;
}

const linen = colour(0xeee5cf);

/** The strip as a piece: plain weave, cut ends, a little of what it holds shining through. */
export function tapePiece(tape: Tape): Piece {
  const cosine = Math.cos(tape.angle);
  const sine = Math.sin(tape.angle);
  const reach = (tape.length + tape.width) / 2 + 2;
  return {
    left: tape.x - reach,
    right: tape.x + reach,
    top: tape.y - reach,
    bottom: tape.y + reach,
    translucency: 0.3,
    shadow: { right: 2, down: 2.5, softness: 1.6, strength: 0.32 },
    at(x, y) {
      const u = (x - tape.x) * cosine + (y - tape.y) * sine;
      const v = (y - tape.y) * cosine - (x - tape.x) * sine;
      const cut = tape.length / 2 + 2.4 * (valueNoise(v / 2.2, u > 0 ? 1 : 9, tape.startValue) - 0.5);
      const inside = Math.min(cut - Math.abs(u), tape.width / 2 - Math.abs(v));
      if (inside <= -0.5) return undefined;
      const weave = 0.5 + 0.5 * Math.cos((Math.PI * u) / 1.7) * Math.cos((Math.PI * v) / 1.7);
      const tone = 0.9 + 0.1 * weave + 0.07 * (valueNoise(u / 14, v / 3, tape.startValue + 5) - 0.5);
      return { cover: 0.95 * smoothStep(-0.5, 0.5, inside), colour: dimmed(linen, tone), relief: 1.2 * smoothStep(0, 2, inside) + 0.35 * weave };
    },
  };
}
