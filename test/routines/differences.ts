/** The first place where two lists differ, as a sentence; signs of zeros count, NaN is like NaN. */
export function firstDifference(actual: ArrayLike<number>, expected: ArrayLike<number>): string | undefined {
  if (actual.length !== expected.length) return `${actual.length} numbers, not ${expected.length}`;
  for (let index = 0; index < actual.length; index++) {
    if (!Object.is(actual[index], expected[index])) return `number ${index} is ${actual[index]}, not ${expected[index]}`;
  }
  return undefined;
}

/** Largest absolute difference; NaN where one of them is NaN. */
export function largestDifference(a: ArrayLike<number>, b: ArrayLike<number>): number {
  let largest = a.length === b.length ? 0 : Infinity;
  for (let index = 0; index < a.length; index++) {
    const difference = Math.abs(a[index]! - b[index]!);
    if (!(difference <= largest)) largest = difference;
  }
  return largest;
}
