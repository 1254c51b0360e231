import { integersOf } from "../math/dyadic.js";
import { absoluteSum, type SeparableTerm } from "../math/separation.js";
import { exactInFloats, fixedTaps, largestShift, offsetError, type FixedTaps } from "./fixedPoint.js";
import type { Problem, Request } from "./problem.js";
import { termsOf } from "./separable.js";

/**
 * A separable kernel in fixed point: column sums of bytes are rounded to 16 bits with `fraction` of them below the point, row sums of
 * those end as bytes.
 *
 *     word[x] = ⌊(bias + Σ column[j] · x[j]) ÷ 2^(column.shift − fraction)⌋        y = ⌊(bias + Σ row[i] · word[x + i]) ÷ 2^(row.shift + fraction)⌋
 */
export interface FixedVectors {
  column: FixedTaps;
  row: FixedTaps;
  fraction: number;
  /** How far a result may be from the exact one before rounding, in levels: gain, offset and dropped terms included. */
  error: number;
}

const largestWord = 32767;
/** Fewer bits below the point than this would be off by more than any tolerance below a level. */
const fewestBits = 3;
const mostBits = 7;

/** The largest |word| ÷ 2^fraction: bytes are never negative, so only taps of one sign count. */
function reach({ integers, shift }: FixedTaps): number {
  let above = 0;
  let below = 0;
  for (const tap of integers) {
    if (tap > 0) above += tap;
    else below -= tap;
  }
  return (255 * Math.max(above, below)) / (1 << shift);
}

/** Column and row of a given scale with so many bits between them; nothing where they do not fit. */
function withBits(column: Float64Array, row: Float64Array, fraction: number, columnShift: number, offset: number, dropped: number): FixedVectors | undefined {
  const rounding = columnShift > fraction ? 0.5 / (1 << fraction) : 0;
  const fixedColumn = fixedTaps(column, columnShift);
  const most = reach(fixedColumn) + rounding;
  if (most * (1 << fraction) > largestWord) return undefined;
  // Words are 2^fraction times what they stand for, and so are the offset and the half that a row sum starts from.
  const rowShift = largestShift(row, most * (1 << fraction), (Math.abs(offset) + 1) * (1 << fraction));
  if (rowShift === undefined || rowShift + fraction > 30) return undefined;
  const fixedRow = fixedTaps(row, rowShift);
  const ofColumn = 255 * fixedColumn.error + rounding;
  const error = fixedRow.error * most + absoluteSum(row) * ofColumn + offsetError(offset, rowShift + fraction) + dropped;
  return { column: fixedColumn, row: fixedRow, fraction, error };
}

const scaledBy = (values: Float64Array<ArrayBuffer>, factor: number): Float64Array<ArrayBuffer> => values.map((value) => value * factor);

/** Every split worth a look: whole numbers where the column has them, else a column of unit weight and the bits that its sums leave. */
function* splits({ column, row }: SeparableTerm, offset: number, dropped: number): Generator<FixedVectors | undefined> {
  const whole = integersOf(column);
  if (whole) {
    const k = whole.findIndex((value) => value !== 0);
    yield withBits(whole, scaledBy(row, column[k]! / whole[k]!), 0, 0, offset, dropped);
  }
  const weight = absoluteSum(column);
  const unit = scaledBy(column, 1 / weight);
  const columnShift = largestShift(unit, 255, 0);
  if (columnShift === undefined) return;
  for (let fraction = Math.min(mostBits, columnShift); fraction >= fewestBits; fraction--) {
    yield withBits(unit, scaledBy(row, weight), fraction, columnShift, offset, dropped);
  }
}

const known = new WeakMap<Request, FixedVectors | string>();

/** The vectors of a kernel of one separable term, gain in the row; or why there are none, as a sentence. */
export function fixedVectors(problem: Problem): FixedVectors | string {
  const { request } = problem;
  let found = known.get(request);
  if (found === undefined) known.set(request, (found = findVectors(problem)));
  return found;
}

function findVectors(problem: Problem): FixedVectors | string {
  const { tolerance, output } = problem.request;
  const terms = termsOf(problem);
  const [term] = terms;
  if (terms.length !== 1 || !term || absoluteSum(term.column) === 0) return "The kernel is not a single separable term.";
  const { column, row } = term;
  const dropped = 255 * Math.abs(output.gain) * problem.analysis.separation().residuals[1]!;
  let best: FixedVectors | undefined;
  for (const split of splits({ column, row: scaledBy(row, output.gain) }, output.offset, dropped))
    if (split && (!best || split.error < best.error)) best = split;
  if (!best) return "The taps do not fit into 16 bits.";
  if (best.error > tolerance) return `Taps and column sums of 16 bits would be off by ${best.error.toPrecision(2)} of a level, ${tolerance} is allowed.`;
  if (best.error > 0 && exactInFloats(column, absoluteSum(integersOf(row) ?? Float64Array.of(Infinity)) * 255))
    return "Sums of floats are exact here, and words of 16 bits are not.";
  return best;
}
