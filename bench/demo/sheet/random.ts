/** A source of repeatable pseudo-random numbers, 0 ≤ next() < 1. */
export interface Random {
  next(): number;
  /** Uniform in low…high. */
  between(low: number, high: number): number;
}

/**
 * A 32-bit xorshift generator (13, 17, 5): the same start value gives the same numbers in every run.
 *
 * @param startValue any integer but 0
 *
 * Source: Marsaglia, "Xorshift RNGs", Journal of Statistical Software 8(14), 2003
 */
export function randomFrom(startValue: number): Random {
  let state = startValue | 0 || 1;
  const next = (): number => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return (state >>> 0) / 4294967296;
  };
  for (let round = 0; round < 8; round += 1) next();
  return { next, between: (low, high) => low + (high - low) * next() };
}

/** A repeatable number 0 ≤ value < 1 for a grid point: integer mixing by multiplications and shifts. */
export function latticeValue(column: number, row: number, startValue: number): number {
  let mixed = Math.imul(column, 0x27d4eb2d) ^ Math.imul(row, 0x165667b1) ^ Math.imul(startValue, 0x9e3779b1);
  mixed = Math.imul(mixed ^ (mixed >>> 15), 0x2c1b3c6d);
  mixed = Math.imul(mixed ^ (mixed >>> 12), 0x297a2d39);
  return ((mixed ^ (mixed >>> 15)) >>> 0) / 4294967296;
}
