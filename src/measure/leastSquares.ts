/** A symmetric matrix, row by row, and its side. */
export interface Gram {
  side: number;
  values: Float64Array;
}

export const gramOf = (side: number): Gram => ({ side, values: new Float64Array(side * side) });

/** Adds weight · row · rowᵀ. */
export function addRow({ side, values }: Gram, row: ArrayLike<number>, weight: number): void {
  for (let i = 0; i < side; i++) {
    if (row[i] === 0) continue;
    for (let j = 0; j < side; j++) values[i * side + j]! += weight * row[i]! * row[j]!;
  }
}

/** The rows and columns that are free. */
function partOf({ side, values }: Gram, free: readonly number[]): Gram {
  const part = gramOf(free.length);
  for (const [a, i] of free.entries()) for (const [b, j] of free.entries()) part.values[a * free.length + b] = values[i * side + j]!;
  return part;
}

/** L with A = L·Lᵀ, of a positive definite A: Cholesky's factor (Golub & Van Loan, Matrix Computations, 4th ed., alg. 4.2.1). */
function factorOf({ side, values }: Gram): Gram {
  const factor = gramOf(side);
  const l = factor.values;
  for (let j = 0; j < side; j++) {
    for (let i = j; i < side; i++) {
      let sum = values[i * side + j]!;
      for (let k = 0; k < j; k++) sum -= l[i * side + k]! * l[j * side + k]!;
      l[i * side + j] = i === j ? Math.sqrt(Math.max(sum, 1e-300)) : sum / l[j * side + j]!;
    }
  }
  return factor;
}

function solved({ side, values }: Gram, right: ArrayLike<number>): Float64Array {
  const x = Float64Array.from(right);
  for (let i = 0; i < side; i++) {
    for (let k = 0; k < i; k++) x[i]! -= values[i * side + k]! * x[k]!;
    x[i]! /= values[i * side + i]!;
  }
  for (let i = side - 1; i >= 0; i--) {
    for (let k = i + 1; k < side; k++) x[i]! -= values[k * side + i]! * x[k]!;
    x[i]! /= values[i * side + i]!;
  }
  return x;
}

/** log |A| of a positive definite matrix. */
export function logDeterminant(gram: Gram): number {
  const { side, values } = factorOf(gram);
  let sum = 0;
  for (let i = 0; i < side; i++) sum += 2 * Math.log(values[i * side + i]!);
  return sum;
}

/** The inverse of a positive definite matrix. */
export function inverseOf(gram: Gram): Gram {
  const { side } = gram;
  const factor = factorOf(gram);
  const inverse = gramOf(side);
  for (let column = 0; column < side; column++) {
    const unit = new Float64Array(side);
    unit[column] = 1;
    const x = solved(factor, unit);
    for (let row = 0; row < side; row++) inverse.values[row * side + column] = x[row]!;
  }
  return inverse;
}

/** A number that enters the solution must raise the gradient by more than this, of a problem whose numbers are near 1. */
const leastGradient = 1e-9;

/**
 * x ≥ 0 that minimises xᵀ·A·x − 2·bᵀ·x for a positive definite A: non-negative least squares, A and b being the sums of weighted products of
 * the rows.
 *
 * Source    Lawson & Hanson, Solving Least Squares Problems, ch. 23; on the normal equations: Bro & De Jong, J. Chemometrics 11: 393, 1997
 */
export function nonNegativeSolution(gram: Gram, right: ArrayLike<number>): Float64Array {
  const { side, values } = gram;
  const x = new Float64Array(side);
  const free = new Set<number>();
  const gradient = (i: number): number => {
    let sum = right[i]!;
    for (let j = 0; j < side; j++) sum -= values[i * side + j]! * x[j]!;
    return sum;
  };
  for (let entered = 0; entered < 3 * side; entered++) {
    let best = -1;
    let most = leastGradient;
    for (let i = 0; i < side; i++) {
      const slope = free.has(i) ? 0 : gradient(i);
      if (slope > most) [most, best] = [slope, i];
    }
    if (best < 0) return x;
    free.add(best);
    while (!moveTo(x, free, gram, right));
  }
  return x;
}

/** Goes to the solution of the free numbers, as far as none becomes negative; those that arrive at 0 are no longer free. True when there. */
function moveTo(x: Float64Array, free: Set<number>, gram: Gram, right: ArrayLike<number>): boolean {
  const names = [...free];
  const target = solved(
    factorOf(partOf(gram, names)),
    names.map((i) => right[i]!),
  );
  let part = 1;
  for (const [k, i] of names.entries()) if (target[k]! <= 0) part = Math.min(part, x[i]! / (x[i]! - target[k]!));
  for (const [k, i] of names.entries()) x[i]! += part * (target[k]! - x[i]!);
  if (part === 1) return true;
  for (const [k, i] of names.entries()) {
    if (target[k]! > 0 || x[i]! > 1e-12) continue;
    x[i] = 0;
    free.delete(i);
  }
  return free.size === 0;
}
