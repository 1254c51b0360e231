/** Radices of the passes, in the order in which they are taken. */
export type Radix = 2 | 3 | 4 | 5;

/**
 * Passes of a transform of 2^a·3^b·5^c points, widest span first: odd radices, then at most one 2, then fours
 * (the last pass needs no turns, which saves most with radix 4). Nothing where another prime divides the number.
 */
export function radicesOf(points: number): Radix[] | undefined {
  const radices: Radix[] = [];
  let left = points;
  for (const radix of [5, 3] as const) for (; left % radix === 0; left /= radix) radices.push(radix);
  let fours = 0;
  for (; left % 4 === 0; left /= 4) fours++;
  if (left % 2 === 0) {
    radices.push(2);
    left /= 2;
  }
  for (; fours > 0; fours--) radices.push(4);
  return left === 1 ? radices : undefined;
}

/** All multiples of four up to `most` of the form 2^a·3^b·5^c, ascending. */
export function smoothMultiplesOfFour(most: number): number[] {
  const numbers: number[] = [];
  for (let fives = 4; fives <= most; fives *= 5) {
    for (let threes = fives; threes <= most; threes *= 3) for (let n = threes; n <= most; n *= 2) numbers.push(n);
  }
  return numbers.sort((a, b) => a - b);
}
