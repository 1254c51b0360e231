import { smoothStep } from "./noise.js";
import { latticeValue } from "./random.js";

/** What the venation is at one point of the blade. */
export interface VeinTouch {
  /** 0 between veins, 1 on the midrib. */
  strength: number;
  /** 0 on a side vein, 1 midway between two: the swelling of the blade. */
  dome: number;
  /** Where the midrib would be met by going back along the side veins, in units. */
  root: number;
}

export interface Veins {
  at(u: number, across: number, side: number, half: number): VeinTouch;
  /** Position between two side veins, growing by 1 from vein to vein. */
  phase(u: number, across: number, side: number): number;
}

interface VeinLayout {
  length: number;
  breadth: number;
  veinPairs: number;
  startValue: number;
}

/**
 * Side veins leave the midrib at about 50° and curve towards the tip: u = root + 0.72·a + 0.5·a²/breadth for a vein
 * from `root`, a being the distance from the midrib.
 */
export function veinsOf(leaf: VeinLayout): Veins {
  const roots = [-1, 1].map((side) => sideRoots(leaf, side));
  const rootOf = (u: number, across: number): number => u - 0.72 * across - (0.5 * across * across) / leaf.breadth;
  const phase = (u: number, across: number, side: number): number => phaseAmong(roots[side < 0 ? 0 : 1], rootOf(u, across));
  const thickness = 0.7 + leaf.length / 260;
  return {
    phase,
    at(u, across, side, half) {
      const position = phase(u, across, side);
      const list = roots[side < 0 ? 0 : 1];
      const nearest = list[Math.min(list.length - 1, Math.max(0, Math.round(position)))];
      const root = rootOf(u, across);
      const slope = 0.72 + across / leaf.breadth;
      const toSide = Math.abs(root - nearest) / Math.sqrt(1 + slope * slope);
      const reach = Math.min(1, across / (half || 1));
      const sideWidth = thickness * (0.85 - 0.6 * reach) * (1 - 0.35 * (u / leaf.length));
      const middleWidth = thickness * (1.9 - 1.5 * (u / leaf.length));
      const middle = smoothStep(middleWidth + 0.7, middleWidth - 0.5, across);
      const sideStrength = 0.86 * smoothStep(sideWidth + 0.6, sideWidth - 0.5, toSide);
      const gap = Math.abs(position - Math.round(position)) * 2;
      return { strength: Math.max(middle, sideStrength), dome: (1 - (1 - gap) ** 2) * smoothStep(0, 5, across), root };
    },
  };
}

function sideRoots(leaf: VeinLayout, side: number): number[] {
  const count = leaf.veinPairs + 6;
  const step = (leaf.length * 0.94) / leaf.veinPairs;
  return Array.from({ length: count }, (_, index) => {
    const jitter = 0.24 * (latticeValue(index, side, leaf.startValue) - 0.5);
    return leaf.length * 0.03 + step * (index - 5 + jitter + (side < 0 ? 0 : 0.28));
  });
}

function phaseAmong(roots: readonly number[], root: number): number {
  if (root <= roots[0]) return 0;
  for (let index = 0; index + 1 < roots.length; index += 1) {
    if (root < roots[index + 1]) return index + (root - roots[index]) / (roots[index + 1] - roots[index]);
  }
  return roots.length - 1;
}
