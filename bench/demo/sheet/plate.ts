import type { Colour } from "./colour.js";

/** The sheet while it is being drawn: linear light and the height of its surface, which the lamp shades at the end. */
export interface Plate {
  width: number;
  height: number;
  /** Pixels for one unit of the drawing, which is 1600 units wide. */
  scale: number;
  /** Interleaved red, green, blue. */
  light: Float32Array;
  /** Height above the paper in units. */
  relief: Float32Array;
}

/** What is laid at one point: how much of it is covered, in which colour, how high it stands. */
export interface Touch {
  cover: number;
  colour: Colour;
  relief: number;
}

/** A thing to be laid on the plate: its bounds in units and what it is at each point, nothing where it is not. */
export interface Piece {
  left: number;
  top: number;
  right: number;
  bottom: number;
  at(x: number, y: number): Touch | undefined;
  /** Share of the light from below that comes through. */
  translucency?: number;
  shadow?: Shadow;
}

/** A soft shadow: offset and softness in units, strength 0…1. */
export interface Shadow {
  right: number;
  down: number;
  softness: number;
  strength: number;
}

export function blankPlate(width: number, height: number): Plate {
  return {
    width,
    height,
    scale: width / 1600,
    light: new Float32Array(width * height * 3),
    relief: new Float32Array(width * height),
  };
}

/** Lays one piece on the plate, its shadow first. */
export function lay(plate: Plate, piece: Piece): void {
  const reach = piece.shadow === undefined ? 1 : Math.abs(piece.shadow.right) + Math.abs(piece.shadow.down) + 3 * piece.shadow.softness;
  const left = Math.max(0, Math.floor((piece.left - reach) * plate.scale));
  const top = Math.max(0, Math.floor((piece.top - reach) * plate.scale));
  const columns = Math.min(plate.width, Math.ceil((piece.right + reach) * plate.scale)) - left;
  const rows = Math.min(plate.height, Math.ceil((piece.bottom + reach) * plate.scale)) - top;
  if (columns <= 0 || rows <= 0) return;
  const touches: (Touch | undefined)[] = [];
  const cover = new Float32Array(columns * rows);
  for (let row = 0; row < rows; row += 1) {
    for (let column = 0; column < columns; column += 1) {
      const touch = piece.at((left + column + 0.5) / plate.scale, (top + row + 0.5) / plate.scale);
      touches.push(touch);
      cover[row * columns + column] = touch?.cover ?? 0;
    }
  }
  if (piece.shadow !== undefined) castShadow(plate, piece.shadow, cover, { left, top, columns, rows });
  for (let row = 0; row < rows; row += 1) {
    for (let column = 0; column < columns; column += 1) {
      const touch = touches[row * columns + column];
      if (touch !== undefined) layTouch(plate, (top + row) * plate.width + left + column, touch, piece.translucency ?? 0);
    }
  }
}

function layTouch(plate: Plate, index: number, touch: Touch, translucency: number): void {
  for (let channel = 0; channel < 3; channel += 1) {
    const below = plate.light[3 * index + channel];
    const through = touch.colour[channel] * (1 - translucency + translucency * 1.35 * below);
    plate.light[3 * index + channel] = below + (through - below) * touch.cover;
  }
  plate.relief[index] += touch.relief * touch.cover;
}

interface Patch {
  left: number;
  top: number;
  columns: number;
  rows: number;
}

function castShadow(plate: Plate, shadow: Shadow, cover: Float32Array, patch: Patch): void {
  const radius = Math.max(1, Math.round(shadow.softness * plate.scale));
  const soft = boxBlurred(boxBlurred(cover, patch.columns, patch.rows, radius), patch.columns, patch.rows, radius);
  const right = Math.round(shadow.right * plate.scale);
  const down = Math.round(shadow.down * plate.scale);
  for (let row = Math.max(0, down); row < Math.min(patch.rows, patch.rows + down); row += 1) {
    for (let column = Math.max(0, right); column < Math.min(patch.columns, patch.columns + right); column += 1) {
      const shade = 1 - shadow.strength * soft[(row - down) * patch.columns + column - right];
      const index = 3 * ((patch.top + row) * plate.width + patch.left + column);
      for (let channel = 0; channel < 3; channel += 1) plate.light[index + channel] *= shade;
    }
  }
}

/** Mean over a (2·radius + 1)² square, outside counted as empty; rows, then columns, by running sums. */
function boxBlurred(source: Float32Array, columns: number, rows: number, radius: number): Float32Array {
  const across = new Float32Array(source.length);
  const result = new Float32Array(source.length);
  for (let row = 0; row < rows; row += 1) slide(source, across, row * columns, 1, columns, radius);
  for (let column = 0; column < columns; column += 1) slide(across, result, column, columns, rows, radius);
  return result;
}

function slide(source: Float32Array, target: Float32Array, start: number, step: number, count: number, radius: number): void {
  let sum = 0;
  for (let index = 0; index < Math.min(radius, count); index += 1) sum += source[start + index * step];
  for (let index = 0; index < count; index += 1) {
    if (index + radius < count) sum += source[start + (index + radius) * step];
    if (index - radius - 1 >= 0) sum -= source[start + (index - radius - 1) * step];
    target[start + index * step] = sum / (2 * radius + 1);
  }
}
