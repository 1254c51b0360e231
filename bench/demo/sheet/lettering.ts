import type { Colour } from "./colour.js";
import { glyphs } from "./glyphs.js";
import { valueNoise } from "./noise.js";
import { lay, type Plate } from "./plate.js";
import { smoothLine, strokePiece, type Point } from "./stroke.js";

/** One line of lettering: the upper left corner of its capitals, capital height and pen width in units. */
export interface Lettering {
  text: string;
  x: number;
  y: number;
  height: number;
  pen: number;
  ink: Colour;
  /** Extra room between letters, in grid steps. @defaultValue 1.5 */
  spacing?: number;
  /** Lean to the right, as a share of the height: a hand. @defaultValue 0 */
  slant?: number;
  /** @defaultValue "left" */
  anchor?: "left" | "middle" | "right";
}

/** Width of a line of lettering in units. */
export function widthOf(line: Lettering): number {
  const step = line.height / 6;
  const spacing = line.spacing ?? 1.5;
  return [...line.text].reduce((sum, letter) => sum + glyphOf(letter)[0] + spacing, -spacing) * step;
}

/** Writes a line on the plate. A hand (slant > 0) wavers a little; print does not. */
export function write(plate: Plate, line: Lettering): void {
  const step = line.height / 6;
  const slant = line.slant ?? 0;
  const start = { left: 0, middle: widthOf(line) / 2, right: widthOf(line) }[line.anchor ?? "left"];
  let x = line.x - start;
  let position = 0;
  for (const letter of line.text) {
    const [width, lines] = glyphOf(letter);
    const lift = slant === 0 ? 0 : (valueNoise(position * 0.9, line.y, 3) - 0.5) * step * 0.7;
    const place = (point: Point): Point => ({ x: x + (point.x + slant * (6 - point.y)) * step, y: line.y + point.y * step + lift });
    for (const stroke of lines.split("|").filter((text) => text !== "")) lay(plate, penStroke(stroke, place, line, position));
    x += (width + (line.spacing ?? 1.5)) * step;
    position += 1;
  }
}

function glyphOf(letter: string): readonly [number, string] {
  const glyph = glyphs[letter];
  if (glyph === undefined) throw new RangeError(`The demo's alphabet has no "${letter}".`);
  return glyph;
}

function penStroke(text: string, place: (point: Point) => Point, line: Lettering, position: number): ReturnType<typeof strokePiece> {
  const smooth = text.startsWith("~");
  const points = text
    .replace("~", "")
    .split(" ")
    .map((pair) => {
      const [x, y] = pair.split(",").map(Number);
      return place({ x, y });
    });
  const pressure = (along: number): number => ((line.slant ?? 0) === 0 ? 1 : 0.8 + 0.45 * valueNoise(along * 2 + position, line.y, 8));
  return strokePiece({
    points: smooth ? smoothLine(points, 5) : points,
    halfWidth: (along) => (line.pen / 2) * pressure(along),
    colour: () => line.ink,
    opacity: 0.9,
  });
}
