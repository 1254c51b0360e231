import { integersOf } from "./dyadic.js";

/** One term of a sum of separable kernels: column vector times row vector. */
export interface SeparableTerm {
  column: Float64Array<ArrayBuffer>;
  row: Float64Array<ArrayBuffer>;
}

/** The first terms of a matrix, and what is left of it after each: residuals[r] = Σ|taps − the sum of r terms|. */
export interface Separation {
  terms: SeparableTerm[];
  residuals: number[];
}

/** A residual below this share of Σ|taps| is what double precision leaves of nothing; no further terms are looked for. */
export const negligible = 1.4210854715202004e-14;

/**
 * Writes a matrix as a sum of separable terms, by crosses through the largest element that is left:
 *
 *     R ← R − R[:, j] · R[i, :] ÷ R[i, j],   |R[i, j]| largest
 *
 * Exact after as many terms as the rank; much cheaper than singular values, and the residual is known exactly after each term.
 *
 * @param taps rows · columns elements, row by row
 * @param mostTerms where to stop
 * Cost    rows · columns operations a term
 * Source  Bebendorf, Approximation of boundary element matrices, Numer. Math. 86, 2000 (cross approximation with full pivoting)
 */
export function separate(taps: Float64Array, rows: number, columns: number, mostTerms: number): Separation {
  const rest = taps.slice();
  const total = absoluteSum(rest);
  const separation: Separation = { terms: [], residuals: [total] };
  let left: Rest = { sum: total, largest: largestOf(rest) };
  while (left.sum > negligible * total && separation.terms.length < mostTerms) {
    const term = cross(rest, rows, columns, left.largest);
    left = subtractTerm(rest, term);
    separation.terms.push(term);
    separation.residuals.push(left.sum);
  }
  if (separation.terms.length === 1 && left.sum <= negligible * total) separation.terms[0] = integerTerm(taps, separation.terms[0]!);
  separation.terms = separation.terms.map(held);
  return separation;
}

/** A matrix whose inverse is no more exact than this tells nothing of small numbers. */
const worstCondition = 1e10;

/**
 * No sum of so many separable terms is nearer to a matrix than this: a lower bound of Σ|what is left|, 0 where it finds none. It looks at
 * terms + 1 rows and columns that lie evenly: what is left of those, S, is at least the smallest singular value of S, and so at least 1 ÷ ‖S⁻¹‖.
 *
 * Cost    (terms + 1)³ operations, whatever the matrix
 * Source  Eckart & Young, Psychometrika 1: 211, 1936 (with the Frobenius norm of S⁻¹, which is no smaller than the spectral one)
 */
export function leastLeftBy(terms: number, taps: Float64Array, rows: number, columns: number): number {
  const side = terms + 1;
  if (rows < side || columns < side) return 0;
  const at = (k: number, count: number): number => Math.floor(((k + 0.5) * count) / side);
  const sample = Array.from({ length: side }, (_, j) => Float64Array.from({ length: side }, (_, i) => taps[at(j, rows) * columns + at(i, columns)]!));
  const size = Math.sqrt(squares(sample));
  const inverse = inverseOf(sample);
  const least = inverse ? 1 / Math.sqrt(squares(inverse)) : 0;
  return least * worstCondition > size ? least : 0;
}

const squares = (matrix: readonly Float64Array[]): number => matrix.reduce((sum, row) => sum + row.reduce((part, value) => part + value * value, 0), 0);

/** By elimination with row pivots (Golub & Van Loan, Matrix Computations, 4th ed., §3.4); nothing where a pivot is 0. Changes what it is given. */
function inverseOf(matrix: Float64Array[]): Float64Array[] | undefined {
  const side = matrix.length;
  const inverse = matrix.map((_, j) => Float64Array.from({ length: side }, (_, i) => (i === j ? 1 : 0)));
  for (let k = 0; k < side; k++) {
    let pivot = k;
    for (let j = k + 1; j < side; j++) if (Math.abs(matrix[j]![k]!) > Math.abs(matrix[pivot]![k]!)) pivot = j;
    if (matrix[pivot]![k] === 0) return undefined;
    [matrix[k], matrix[pivot]] = [matrix[pivot]!, matrix[k]!];
    [inverse[k], inverse[pivot]] = [inverse[pivot]!, inverse[k]!];
    const scale = 1 / matrix[k]![k]!;
    for (const rows of [matrix, inverse]) for (let i = 0; i < side; i++) rows[k]![i]! *= scale;
    for (let j = 0; j < side; j++) {
      if (j === k) continue;
      const factor = matrix[j]![k]!;
      for (const rows of [matrix, inverse]) for (let i = 0; i < side; i++) rows[j]![i]! -= factor * rows[k]![i]!;
    }
  }
  return inverse;
}

/** The same term with Σ|row| ≤ 1, by a power of two: a row's result is never larger than its samples, and integers stay as exact. */
function held({ column, row }: SeparableTerm): SeparableTerm {
  const sum = absoluteSum(row);
  let scale = 1;
  while (sum > scale) scale *= 2;
  return { column: column.map((value) => value * scale), row: row.map((value) => value / scale) };
}

export function absoluteSum(values: ArrayLike<number>): number {
  let sum = 0;
  for (let k = 0; k < values.length; k++) sum += Math.abs(values[k]!);
  return sum;
}

/** What is left of a matrix: Σ|elements|, and where the largest is (the first of several). */
interface Rest {
  sum: number;
  largest: number;
}

function largestOf(values: Float64Array): number {
  let at = 0;
  for (let k = 1; k < values.length; k++) if (Math.abs(values[k]!) > Math.abs(values[at]!)) at = k;
  return at;
}

function cross(rest: Float64Array, rows: number, columns: number, at: number): SeparableTerm {
  const pivot = rest[at]!;
  const i = Math.floor(at / columns);
  const j = at % columns;
  const column = new Float64Array(rows);
  const row = new Float64Array(columns);
  for (let r = 0; r < rows; r++) column[r] = rest[r * columns + j]!;
  for (let c = 0; c < columns; c++) row[c] = rest[i * columns + c]! / pivot;
  return { column, row };
}

/** Takes a term away. */
function subtractTerm(rest: Float64Array, { column, row }: SeparableTerm): Rest {
  let sum = 0;
  let most = -1;
  let largest = 0;
  for (let r = 0, k = 0; r < column.length; r++) {
    const factor = column[r]!;
    for (let c = 0; c < row.length; c++, k++) {
      const value = rest[k]! - factor * row[c]!;
      rest[k] = value;
      const size = Math.abs(value);
      sum += size;
      if (size > most) {
        most = size;
        largest = k;
      }
    }
  }
  return { sum, largest };
}

/**
 * A term of rank 1 whose row consists of integers, where the taps are multiples of one power of two: sums of integer
 * samples stay exact then ([1 2 1] ⊗ [1 2 1] ÷ 16 rather than thirds). The term as it is where there is no such row.
 */
function integerTerm(taps: Float64Array, term: SeparableTerm): SeparableTerm {
  const columns = term.row.length;
  const pivotRow = Math.max(
    0,
    term.column.findIndex((value) => value !== 0),
  );
  const row = integersOf(taps.subarray(pivotRow * columns, (pivotRow + 1) * columns));
  if (!row) return term;
  const pivotColumn = row.findIndex((value) => value !== 0);
  const column = term.column.map((_, r) => taps[r * columns + pivotColumn]! / row[pivotColumn]!);
  for (let r = 0, k = 0; r < column.length; r++) {
    for (let c = 0; c < columns; c++, k++) if (column[r]! * row[c]! !== taps[k]!) return term;
  }
  return { column, row };
}
