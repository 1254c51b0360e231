import { kernel, type Kernel } from "../../src/index.js";
import { oneOf, spreadEvenly, wholeNumber, type Draw } from "./draw.js";

/** Taps of one kind, as rows, so that kernels can be made of them as often as needed: what is known of a kernel is kept with its object. */
export interface Taps {
  name: string;
  rows: Float64Array[];
  /** Levels of the output that a method may add on purpose, where these taps are made for that. */
  tolerance?: number;
}

type Element = (row: number, column: number) => number;

const rowsOf = (width: number, height: number, element: Element): Float64Array[] =>
  Array.from({ length: height }, (_, j) => Float64Array.from({ length: width }, (_unused, i) => element(j, i)));

/** The same with Σ|taps| = 1. */
function ofUnitWeight(rows: Float64Array[]): Float64Array[] {
  const sum = rows.reduce((total, row) => row.reduce((part, tap) => part + Math.abs(tap), total), 0);
  return rows.map((row) => row.map((tap) => tap / sum));
}

const vector = (draw: Draw, length: number): number[] => Array.from({ length }, () => 0.05 + draw());

/** exp(−x² / 2), x from −2.5 to 2.5. */
const bellVector = (length: number): number[] =>
  Array.from({ length }, (_, k) => {
    const x = length === 1 ? 0 : (5 * k) / (length - 1) - 2.5;
    return Math.exp((-x * x) / 2);
  });

function sumOfOuterProducts(draw: Draw, width: number, height: number, rank: number): Element {
  const terms = Array.from({ length: rank }, () => ({ column: vector(draw, height), row: vector(draw, width) }));
  return (j, i) => terms.reduce((sum, { column, row }) => sum + column[j]! * row[i]!, 0);
}

type Kind = (draw: Draw, width: number, height: number) => Taps;

const structureless: Kind = (draw, width, height) => ({ name: "any", rows: rowsOf(width, height, () => 0.05 + draw()) });

/** Positive and negative taps. */
const signed: Kind = (draw, width, height) => ({ name: "signed", rows: rowsOf(width, height, () => draw() - 0.4) });

const separable: Kind = (draw, width, height) => {
  const bell = draw() < 0.5;
  const [column, row] = bell ? [bellVector(height), bellVector(width)] : [vector(draw, height), vector(draw, width)];
  return { name: bell ? "bell" : "outer product", rows: rowsOf(width, height, (j, i) => column[j]! * row[i]!) };
};

const lowRank: Kind = (draw, width, height) => {
  const rank = wholeNumber(draw, 2, 4);
  return { name: `rank ${rank}`, rows: rowsOf(width, height, sumOfOuterProducts(draw, width, height, rank)) };
};

/** A sum of few outer products and a little of everything else: whether it is taken for the sum is up to the tolerance. */
const nearlyLowRank: Kind = (draw, width, height) => {
  const rank = wholeNumber(draw, 1, 4);
  const element = sumOfOuterProducts(draw, width, height, rank);
  const share = spreadEvenly(draw, 1e-5, 1e-2);
  const rows = rowsOf(width, height, (j, i) => element(j, i) * (1 + share * (draw() - 0.5)));
  return { name: `rank ${rank} but for ${share.toExponential(0)}`, rows, tolerance: oneOf(draw, [0.25, 1, 4]) };
};

/** A disk: of no low rank, smooth but for its edge. */
const disk: Kind = (_draw, width, height) => {
  const inside: Element = (j, i) => {
    const [x, y] = [(2 * i + 1) / width - 1, (2 * j + 1) / height - 1];
    return x * x + y * y <= 1 ? 1 : 0;
  };
  return { name: "disk", rows: rowsOf(width, height, inside) };
};

const box: Kind = (_draw, width, height) => ({ name: "box", rows: rowsOf(width, height, () => 1) });

/** Few taps at random places, or two beside each other in each row. */
const sparse: Kind = (draw, width, height) => {
  if (draw() < 0.4) return { name: "line", rows: rowsOf(width, height, (j, i) => (i === j % width || i === (j + 1) % width ? 1 : 0)) };
  const share = spreadEvenly(draw, 0.002, 0.3);
  const rows = rowsOf(width, height, () => (draw() < share ? 0.05 + draw() : 0));
  rows[Math.floor(height / 2)]![Math.floor(width / 2)] = 1;
  return { name: `${(100 * share).toPrecision(2)} % of`, rows };
};

/** Every kind, with how many of a hundred problems have it. */
const kinds: readonly [share: number, kind: Kind][] = [
  [24, structureless],
  [4, signed],
  [26, separable],
  [12, lowRank],
  [8, nearlyLowRank],
  [4, disk],
  [11, box],
  [11, sparse],
];

export function drawTaps(draw: Draw): Taps {
  const side = (): number => Math.round(spreadEvenly(draw, 1, 255));
  const width = side();
  const height = draw() < 0.6 ? width : side();
  let left = draw() * kinds.reduce((sum, [share]) => sum + share, 0);
  const [, kind] = kinds.find(([share]) => (left -= share) < 0)!;
  const taps = kind(draw, width, height);
  return { ...taps, name: `${taps.name} ${width}×${height}`, rows: ofUnitWeight(taps.rows) };
}

export const isSigned = ({ rows }: Taps): boolean => rows.some((row) => row.some((tap) => tap < 0));

/** A kernel that nobody has seen: nothing is known of it yet. */
export const freshKernel = ({ rows }: Taps): Kernel => kernel(rows);
