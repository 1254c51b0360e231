import { radicesOf, smoothMultiplesOfFour, type Radix } from "../math/smoothNumbers.js";
import { rowStride } from "./arrangement.js";
import type { Problem } from "./problem.js";

/** How an image is cut for the FFT: see the core's fft/tiles. */
export interface Tiling {
  /** Points of a column transform, and of a row transform. */
  rows: number;
  columns: number;
  /** Results that one strip, and one tile of a row, give. */
  stripRows: number;
  tileStep: number;
  strips: number;
  tiles: number;
  /** Complex planes worked on together, and how often they are filled. */
  pairs: number;
  groups: number;
  /** Strips in a group: two where a plane holds one channel of two strips. */
  stripsPerGroup: number;
  planeStride: number;
  planeBytes: number;
  spectrumBytes: number;
  /** Weighted points of all column and row passes of a run: the fixed measure that tilings are compared by. */
  columnPasses: number;
  rowPasses: number;
}

/**
 * Loads, stores and arithmetic of one point in one pass, counted in vector instructions and divided by those of radix 4 (50 ÷ 4):
 * radix 2: 18 ÷ 2, radix 3: 40 ÷ 3, radix 5: 92 ÷ 5.
 */
const passWeight: Record<Radix, number> = { 2: 0.72, 3: 1.07, 4: 1, 5: 1.47 };

/** Turning, storing and multiplying by the spectrum cost a row's point about two and a half passes. */
const rowOverhead = 2.5;

/**
 * Rows longer than this leave the first cache: scratch and spectrum take 64 bytes a point. With 2048 points a run took half as much
 * again as predicted without this factor (bench/results/tiles-amd-epyc-node-20.20.2.json).
 */
const cachedPoints = 1024;
const uncachedRow = 1.5;

/** Planes and spectrum beyond 8 MB slow every pass down: a fifth at 40 MB, a quarter at 60 MB, measured in the same place. */
const cachedBytes = 8_000_000;
const bytesToDouble = 200_000_000;

/** Points of the longest transforms that are considered. */
const mostPoints = 4096;

interface Size {
  points: number;
  weight: number;
}

let known: readonly Size[] | undefined;

/** Transforms to choose from, found when the first FFT is considered. */
function sizes(): readonly Size[] {
  return (known ??= smoothMultiplesOfFour(mostPoints).map((points) => ({
    points,
    weight: radicesOf(points)!.reduce((sum, radix) => sum + passWeight[radix], 0),
  })));
}

/** Lengths of one axis that are worth a look: long enough for the kernel, and the first that holds the whole image is the last. */
function lengths(least: number, whole: number): readonly Size[] {
  const enough = sizes().filter(({ points }) => points >= least);
  const last = enough.findIndex(({ points }) => points >= whole);
  return last < 0 ? enough : enough.slice(0, last + 1);
}

const rowLengths = ({ vertical }: Problem): readonly Size[] => lengths(vertical.taps, vertical.extended + 3);
const columnLengths = ({ horizontal }: Problem): readonly Size[] => lengths(horizontal.taps + 3, horizontal.extended + 3);

/** How much slower passes are where planes and spectrum leave the cache. */
function spillingOf({ pairs, planeBytes, spectrumBytes }: Pick<Tiling, "pairs" | "planeBytes" | "spectrumBytes">): number {
  return 1 + Math.max(0, 2 * pairs * planeBytes + spectrumBytes - cachedBytes) / bytesToDouble;
}

function tilingOf(problem: Problem, rows: Size, columns: Size): Tiling {
  const { horizontal, vertical, channels } = problem;
  const stripRows = Math.min(vertical.count, rows.points - vertical.taps + 1);
  const tileStep = 4 * Math.floor((columns.points - horizontal.taps + 1) / 4);
  const strips = Math.ceil(vertical.count / stripRows);
  const tiles = Math.ceil(horizontal.count / tileStep);
  const stripsPerGroup = channels % 2 === 0 ? 1 : 2;
  const pairs = channels % 2 === 0 ? channels / 2 : channels;
  const groups = Math.ceil(strips / stripsPerGroup);
  const planeStride = rowStride(Math.max(horizontal.extended + 3, columns.points) * 4);
  const planeBytes = rows.points * planeStride;
  const spectrumBytes = rows.points * columns.points * 8;
  const spilling = spillingOf({ pairs, planeBytes, spectrumBytes });
  const rowSlowness = spilling * (columns.points > cachedPoints ? uncachedRow : 1);
  const touched = 16 * (Math.ceil(horizontal.extended / 16) + Math.ceil(horizontal.count / 16));
  return {
    rows: rows.points,
    columns: columns.points,
    stripRows,
    tileStep,
    strips,
    tiles,
    pairs,
    groups,
    stripsPerGroup,
    planeStride,
    planeBytes,
    spectrumBytes,
    columnPasses: spilling * groups * pairs * rows.points * touched * rows.weight,
    rowPasses: rowSlowness * groups * pairs * rows.points * tiles * columns.points * (2 * columns.weight + rowOverhead),
  };
}

/** A group of strips takes at least five calls into the core, each as long as about a hundred points in one pass; planes that are too small drown in them. */
const pointsPerGroup = 500;

const costOf = (tiling: Tiling): number => tiling.columnPasses + tiling.rowPasses + pointsPerGroup * tiling.groups * tiling.stripsPerGroup;

/** Every tiling worth a look. */
function* tilings(problem: Problem, rowChoices = rowLengths(problem)): Generator<Tiling> {
  const columnChoices = columnLengths(problem);
  for (const rows of rowChoices) for (const columns of columnChoices) yield tilingOf(problem, rows, columns);
}

/**
 * The cheapest tiling without trying all pairs: with the rows' length given no cost is below that of passes in the cache with the columns
 * that suit the image best, which do not depend on the rows. Rows whose bound is above the cost of the most promising ones are left out.
 */
function cheapestTiling(problem: Problem): Tiling | undefined {
  const rowChoices = rowLengths(problem);
  const [smallest] = columnLengths(problem);
  if (!smallest || rowChoices.length === 0) return undefined;
  const first = rowChoices[0]!;
  const inCache = (tiling: Tiling): number => tiling.rowPasses / spillingOf(tiling) / (tiling.groups * tiling.pairs * tiling.rows);
  let rowPoint = Infinity;
  for (const tiling of tilings(problem, [first])) rowPoint = Math.min(rowPoint, inCache(tiling));
  const bounds = rowChoices.map((rows) => {
    const { columnPasses, groups, pairs, stripsPerGroup, ...sizeOf } = tilingOf(problem, rows, smallest);
    const passes = columnPasses / spillingOf({ pairs, ...sizeOf }) + groups * pairs * rows.points * rowPoint;
    return passes + pointsPerGroup * groups * stripsPerGroup;
  });
  const promising = rowChoices[bounds.indexOf(Math.min(...bounds))]!;
  const limit = costOf(leastOf(tilings(problem, [promising]), costOf)!) * (1 + 1e-9);
  return leastOf(
    tilings(
      problem,
      rowChoices.filter((_, k) => bounds[k]! <= limit),
    ),
    costOf,
  );
}

/**
 * The tiling with the fewest weighted points that fits, the smaller one of equals; where none fits, the one with the smallest planes
 * and spectrum. Nothing where the kernel is longer than the longest transform.
 *
 * It depends on the problem and on what fits, never on a profile, so that a forced FFT gives the same bytes everywhere.
 */
export function planTiles(problem: Problem, fits: (tiling: Tiling) => boolean): Tiling | undefined {
  const cheapest = cheapestTiling(problem);
  if (!cheapest || fits(cheapest)) return cheapest;
  const memory = (tiling: Tiling): number => 2 * tiling.pairs * tiling.planeBytes + tiling.spectrumBytes;
  return leastOf(tilings(problem), costOf, fits) ?? leastOf(tilings(problem), memory);
}

function leastOf(all: Iterable<Tiling>, measure: (tiling: Tiling) => number, allowed: (tiling: Tiling) => boolean = () => true): Tiling | undefined {
  let best: Tiling | undefined;
  for (const tiling of all) if ((!best || measure(tiling) < measure(best)) && allowed(tiling)) best = tiling;
  return best;
}
