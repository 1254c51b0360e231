import type { Colour } from "./colour.js";
import type { Piece, Shadow } from "./plate.js";

export interface Point {
  x: number;
  y: number;
}

/** A brush line through points with round ends; along runs 0…1 from the first point to the last. */
export interface Stroke {
  points: readonly Point[];
  /** Half width in units. */
  halfWidth(along: number): number;
  /** across: −1 on the left edge, 1 on the right. */
  colour(along: number, across: number, x: number, y: number): Colour;
  /** Height of the middle above the edges. @defaultValue 0 */
  relief?: number;
  opacity?: number;
  shadow?: Shadow;
}

/** Where a point lies against a line of points. */
interface Nearest {
  distance: number;
  along: number;
  side: number;
}

/** A smooth line through the given points (Catmull–Rom), `steps` pieces between each two. */
export function smoothLine(points: readonly Point[], steps: number): Point[] {
  const line: Point[] = [];
  for (let index = 0; index + 1 < points.length; index += 1) {
    const [a, b, c, d] = [points[Math.max(0, index - 1)], points[index], points[index + 1], points[Math.min(points.length - 1, index + 2)]];
    for (let step = 0; step < steps; step += 1) line.push(between(a, b, c, d, step / steps));
  }
  line.push(points[points.length - 1]);
  return line;
}

function between(a: Point, b: Point, c: Point, d: Point, t: number): Point {
  const at = (p: number, q: number, r: number, s: number): number =>
    0.5 * (2 * q + (r - p) * t + (2 * p - 5 * q + 4 * r - s) * t * t + (3 * q - p - 3 * r + s) * t * t * t);
  return { x: at(a.x, b.x, c.x, d.x), y: at(a.y, b.y, c.y, d.y) };
}

/** The stroke as a piece with a soft edge of one unit. */
export function strokePiece(stroke: Stroke): Piece {
  const widest = Math.max(...Array.from({ length: 21 }, (_, step) => stroke.halfWidth(step / 20))) + 1;
  const xs = stroke.points.map((point) => point.x);
  const ys = stroke.points.map((point) => point.y);
  const piece: Piece = {
    left: Math.min(...xs) - widest,
    top: Math.min(...ys) - widest,
    right: Math.max(...xs) + widest,
    bottom: Math.max(...ys) + widest,
    at(x, y) {
      const near = nearestOn(stroke.points, x, y, widest);
      if (near === undefined) return undefined;
      const half = stroke.halfWidth(near.along);
      const cover = Math.min(1, Math.max(0, half - near.distance + 0.5)) * (stroke.opacity ?? 1);
      if (cover <= 0) return undefined;
      const across = (near.side * near.distance) / half;
      return { cover, colour: stroke.colour(near.along, across, x, y), relief: (stroke.relief ?? 0) * Math.sqrt(Math.max(0, 1 - across * across)) };
    },
  };
  return stroke.shadow === undefined ? piece : { ...piece, shadow: stroke.shadow };
}

/** The nearest place on the line, undefined where it is farther than `reach`. */
function nearestOn(points: readonly Point[], x: number, y: number, reach: number): Nearest | undefined {
  let best: Nearest | undefined;
  let limit = reach * reach;
  for (let index = 0; index + 1 < points.length; index += 1) {
    const from = points[index];
    const spanX = points[index + 1].x - from.x;
    const spanY = points[index + 1].y - from.y;
    const share = Math.min(1, Math.max(0, ((x - from.x) * spanX + (y - from.y) * spanY) / (spanX * spanX + spanY * spanY || 1)));
    const gapX = x - from.x - share * spanX;
    const gapY = y - from.y - share * spanY;
    const squared = gapX * gapX + gapY * gapY;
    if (squared >= limit) continue;
    limit = squared;
    best = { distance: Math.sqrt(squared), along: (index + share) / (points.length - 1), side: spanX * gapY - spanY * gapX < 0 ? -1 : 1 };
  }
  return best;
}
