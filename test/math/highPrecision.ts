/**
 * Real numbers in fixed point, as whole numbers of 2^−1700, for checking doubles: far more digits than any result needs.
 * The formulas are the defining series; nothing is shared with the package's own functions.
 */
const fractionBits = 1700n;
export const one = 1n << fractionBits;

/** A finite double, exactly. */
export function exactly(x: number): bigint {
  const { mantissa, exponent } = parts(x);
  const value = mantissa << (fractionBits + BigInt(exponent));
  return x < 0 ? -value : value;
}

/** |got − exact| in units of the last place of `got`. */
export function ulpError(got: number, exact: bigint): number {
  const ulp = 1n << (fractionBits + BigInt(parts(got).exponent));
  const difference = exactly(got) - exact;
  return Number(((difference < 0n ? -difference : difference) << 20n) / ulp) / 1048576;
}

/** π by Machin's formula, 16 · arctan(1/5) − 4 · arctan(1/239). */
export const pi = 16n * arctanOfReciprocal(5n) - 4n * arctanOfReciprocal(239n);

/** eˣ: the Taylor series of x / 2¹², squared twelve times. */
export function exactExponential(x: bigint): bigint {
  const step = x >> 12n;
  let sum = one;
  let term = one;
  for (let k = 1n; term !== 0n && term !== -1n; k++) {
    term = product(term, step) / k;
    sum += term;
  }
  for (let k = 0; k < 12; k++) sum = product(sum, sum);
  return sum;
}

/** erf(x) = 2/√π · Σ (−1)ⁿ x²ⁿ⁺¹ / (n! (2n + 1)). */
export function exactErrorFunction(x: bigint): bigint {
  const square = product(x, x);
  let power = x;
  let sum = 0n;
  for (let n = 0n; power !== 0n && power !== -1n; n++) {
    sum += power / (2n * n + 1n);
    power = -product(power, square) / (n + 1n);
  }
  return quotient(2n * sum, squareRoot(pi));
}

/** cos and sin of 2πk / n, k and n whole. */
export function exactRoot(k: number, n: number): { cosine: bigint; sine: bigint } {
  const angle = (2n * pi * BigInt(k)) / BigInt(n);
  let term = one;
  const sums = [0n, 0n];
  for (let j = 0n; term !== 0n && term !== -1n; j++) {
    const sign = (j / 2n) % 2n === 0n ? 1n : -1n;
    sums[Number(j % 2n)]! += sign * term;
    term = product(term, angle) / (j + 1n);
  }
  return { cosine: sums[0]!, sine: sums[1]! };
}

/** The double nearest to a fixed-point number, for comparison with printed digits. */
export function toNumber(x: bigint): number {
  return Number(x >> (fractionBits - 80n)) / 2 ** 80;
}

export function product(a: bigint, b: bigint): bigint {
  return (a * b) >> fractionBits;
}

export function quotient(a: bigint, b: bigint): bigint {
  return (a << fractionBits) / b;
}

function arctanOfReciprocal(n: bigint): bigint {
  let power = one / n;
  let sum = 0n;
  for (let k = 1n; power !== 0n; k += 2n) {
    sum += (k % 4n === 1n ? 1n : -1n) * (power / k);
    power /= n * n;
  }
  return sum;
}

export function squareRoot(x: bigint): bigint {
  const target = x << fractionBits;
  let root = 1n << (fractionBits + 2n);
  for (let next = (root + target / root) >> 1n; next < root; next = (root + target / root) >> 1n) root = next;
  return root;
}

function parts(x: number): { mantissa: bigint; exponent: number } {
  const view = new DataView(new ArrayBuffer(8));
  view.setFloat64(0, x);
  const bits = view.getBigUint64(0);
  const biased = Number((bits >> 52n) & 2047n);
  const fraction = bits & ((1n << 52n) - 1n);
  return biased === 0 ? { mantissa: fraction, exponent: -1074 } : { mantissa: fraction | (1n << 52n), exponent: biased - 1075 };
}
