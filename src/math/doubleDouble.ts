/** 2²⁷ + 1: multiplying by it splits a double into two halves of 26 bits. */
const splitter = 134217729;

/**
 * What rounding took from a product: a · b = fl(a · b) + productError(a, b), exactly.
 *
 * Requires  |a|, |b| < 2⁹⁹⁶, and a product that does not underflow
 * Source    Dekker, A floating-point technique for extending the available precision, Numerische Mathematik 18, 1971
 */
export function productError(a: number, b: number): number {
  const scaledA = splitter * a;
  const highA = scaledA - (scaledA - a);
  const lowA = a - highA;
  const scaledB = splitter * b;
  const highB = scaledB - (scaledB - b);
  const lowB = b - highB;
  return lowA * lowB - (a * b - highA * highB - lowA * highB - highA * lowB);
}
