import { blend, colour, dimmed, type Colour } from "./colour.js";
import { cellWallDistance, layeredNoise, smoothStep, valueNoise } from "./noise.js";
import type { Piece, Touch } from "./plate.js";
import { veinsOf, type Veins } from "./veins.js";

/** One leaf, pressed: where it sits, its outline and its age. Lengths in units. */
export interface Leaf {
  x: number;
  y: number;
  /** Direction from base to tip in radians, 0 to the right, growing clockwise on the picture. */
  angle: number;
  length: number;
  /** Largest half width. */
  breadth: number;
  /** Sideways bow of the midrib, as a share of the length. */
  bend: number;
  /** Place of the widest point from base to tip, 0…1. */
  widestAt: number;
  veinPairs: number;
  /** Teeth between two side veins, and their depth as a share of the half width. */
  teeth: number;
  toothDepth: number;
  /** Depth of the lobes between side veins as a share of the half width; 0 for an entire leaf. */
  lobeDepth: number;
  /** How far it has turned from olive to brown, 0…1. */
  browning: number;
  /** The paler lower side with standing veins is shown. */
  underside: boolean;
  startValue: number;
}

/** A point in the leaf's own measure. */
interface Place {
  /** Along the midrib, 0 base to 1 tip. */
  along: number;
  /** Distance from the midrib in units, and the side (−1 or 1). */
  across: number;
  side: number;
  /** Half width of the blade here. */
  half: number;
}

const olive = colour(0x6f7040);
const deep = colour(0x4b5a34);
const brown = colour(0x7d5a33);
const straw = colour(0xae9657);
const burnt = colour(0x43301f);
const veinAbove = colour(0xb09f68);
const veinBelow = colour(0xcbb98a);

/** The leaf as a piece: blade with margin, veins of three orders, quilting between them, spots and a few holes. */
export function leafPiece(leaf: Leaf): Piece {
  const veins = veinsOf(leaf);
  const cosine = Math.cos(leaf.angle);
  const sine = Math.sin(leaf.angle);
  const reach = leaf.breadth * 1.15 + Math.abs(leaf.bend) * leaf.length;
  const corners = [-1, 1].flatMap((side) =>
    [0, leaf.length].map((u) => ({ x: leaf.x + u * cosine - side * reach * sine, y: leaf.y + u * sine + side * reach * cosine })),
  );
  return {
    left: Math.min(...corners.map((corner) => corner.x)),
    right: Math.max(...corners.map((corner) => corner.x)),
    top: Math.min(...corners.map((corner) => corner.y)),
    bottom: Math.max(...corners.map((corner) => corner.y)),
    translucency: 0.16,
    shadow: { right: 3, down: 4, softness: Math.min(3.2, 1.2 + leaf.length / 120), strength: 0.42 },
    at(x, y) {
      const u = (x - leaf.x) * cosine + (y - leaf.y) * sine;
      const along = u / leaf.length;
      if (along <= 0 || along >= 1) return undefined;
      const wave = leaf.breadth * 0.05 * (valueNoise(along * 5, 0.5, leaf.startValue + 3) - 0.5);
      const v = (y - leaf.y) * cosine - (x - leaf.x) * sine - 4 * leaf.bend * leaf.length * along * (1 - along) - wave;
      return bladeTouch(leaf, veins, u, along, v);
    },
  };
}

function bladeTouch(leaf: Leaf, veins: Veins, u: number, along: number, v: number): Touch | undefined {
  const side = v < 0 ? -1 : 1;
  const across = Math.abs(v);
  const smooth = uncutHalfWidth(leaf, along);
  if (across > 1.03 * smooth + 1) return undefined;
  const half = halfWidth(leaf, veins, u, across, side, smooth);
  const place: Place = { along, across, side, half };
  const edge = (half - across) * 0.82;
  if (edge <= -0.6) return undefined;
  const hole = holeShare(leaf, u, v);
  const cover = smoothStep(-0.6, 0.6, edge) * (1 - hole);
  if (cover <= 0) return undefined;
  const vein = veins.at(u, across, side, half);
  const net = smoothStep(0.16, 0.02, cellWallDistance(vein.root / 11, across / 8, leaf.startValue + 40));
  const fine = smoothStep(0.2, 0.03, cellWallDistance(u / 3.6, v / 3.4, leaf.startValue + 80));
  const strength = Math.max(vein.strength, 0.4 * net, 0.16 * fine);
  const tint = bladeColour(leaf, place, u, v, edge);
  const lit = blend(tint, leaf.underside ? veinBelow : veinAbove, strength * (leaf.underside ? 0.8 : 0.62));
  const standing = leaf.underside ? 1 : -0.55;
  const quilt = (leaf.underside ? 0.8 : 1.5) * vein.dome;
  const crumple = 3.2 * layeredNoise(u / 42, v / 42, 3, leaf.startValue + 7);
  return {
    cover,
    colour: dimmed(lit, 1 - 0.35 * smoothStep(0.25, 0.02, hole > 0 ? 1 - hole : 1)),
    relief: 1.3 * smoothStep(-0.5, 3, edge) + quilt + crumple + standing * (1.5 * vein.strength + 0.5 * net) - 0.25 * fine,
  };
}

/** Half width of the uncut blade: breadth · tᵃ(1 − t)ᵇ over its greatest value, with a/b such that t is `widestAt` there. */
function uncutHalfWidth(leaf: Leaf, along: number): number {
  const toTip = 0.92;
  const toBase = (toTip * leaf.widestAt) / (1 - leaf.widestAt);
  return leaf.breadth * (along / leaf.widestAt) ** toBase * ((1 - along) / (1 - leaf.widestAt)) ** toTip;
}

/** Outline: a smooth blade, cut into lobes and teeth that follow the side veins. */
function halfWidth(leaf: Leaf, veins: Veins, u: number, across: number, side: number, smooth: number): number {
  const along = u / leaf.length;
  const phase = veins.phase(u, Math.min(across, smooth), side);
  const lobe =
    leaf.lobeDepth === 0
      ? 0
      : leaf.lobeDepth * (0.5 - 0.5 * Math.cos(2 * Math.PI * (phase + 0.5))) ** 2.2 * smoothStep(0.08, 0.42, along) * smoothStep(1, 0.86, along);
  const saw = leaf.teeth === 0 ? 0 : leaf.toothDepth * (1 - ((phase * leaf.teeth) % 1)) ** 0.9;
  return smooth * (1 - lobe) * (1 - saw) * (1 + 0.03 * side);
}

function bladeColour(leaf: Leaf, place: Place, u: number, v: number, edge: number): Colour {
  const cloud = layeredNoise(u / 70, v / 70, 4, leaf.startValue);
  const age = Math.min(1, Math.max(0, leaf.browning + 1.1 * (cloud - 0.5) + 0.22 * (place.along - 0.4)));
  let tint = blend(blend(deep, olive, smoothStep(0, 0.45, age)), brown, smoothStep(0.4, 0.95, age));
  tint = blend(tint, straw, 0.5 * smoothStep(0.55, 0.9, layeredNoise(u / 46, v / 46, 3, leaf.startValue + 12)) + 0.28 * smoothStep(9, 1, edge));
  tint = blend(tint, burnt, 0.6 * smoothStep(2.6, 0, edge) + 0.85 * smoothStep(0.735, 0.8, layeredNoise(u / 17, v / 17, 3, leaf.startValue + 21)));
  if (leaf.underside) tint = blend(tint, straw, 0.3);
  return dimmed(tint, 0.86 + 0.28 * layeredNoise(u / 2.3, v / 2.3, 2, leaf.startValue + 30));
}

/** A few small holes that insects have left, 0 outside and 1 inside. */
function holeShare(leaf: Leaf, u: number, v: number): number {
  return smoothStep(0.885, 0.9, layeredNoise(u / 30 + 9, v / 30 + 9, 2, leaf.startValue + 55));
}
