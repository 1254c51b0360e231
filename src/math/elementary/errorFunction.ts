import { productError } from "../doubleDouble.js";
import { exponential } from "./exponential.js";

const twoByRootPi = 1.1283791670955126;
const reciprocalRootPi = 0.5641895835477563;

/**
 * The error function.
 *
 *     erf(x) = 2/√π · ∫₀ˣ e^(−t²) dt = 2/√π · e^(−x²) · Σₙ 2ⁿ · x²ⁿ⁺¹ / (1 · 3 · … · (2n + 1))
 *
 * All terms of the series have one sign, so that nothing cancels; from |x| = ¾ on it is 1 − erfc(x).
 *
 * Accuracy  < 4 ulp
 * Source    Abramowitz & Stegun, Handbook of Mathematical Functions, 7.1.6
 */
export function errorFunction(x: number): number {
  const magnitude = Math.abs(x);
  if (magnitude >= 0.75) return x > 0 ? 1 - complementaryErrorFunction(x) : complementaryErrorFunction(-x) - 1;
  const square = x * x;
  let term = x;
  let rest = 0;
  for (let n = 1; Math.abs(term) > 1e-18 * magnitude; n++) {
    term *= (2 * square) / (2 * n + 1);
    rest += term;
  }
  return twoByRootPi * exponential(-square, -productError(x, x)) * (x + rest);
}

/**
 * 1 − erf(x), without the cancellation: small results keep their digits.
 *
 *     erfc(x) = e^(−x²) / √π · 1 / (x + (1/2) / (x + (2/2) / (x + (3/2) / (x + …)))),   x > 0
 *
 * Accuracy  < 4 ulp for x ≥ 0, where the result is a normal number
 * Source    Abramowitz & Stegun, Handbook of Mathematical Functions, 7.1.14
 */
export function complementaryErrorFunction(x: number): number {
  if (x < 0.5) return 1 - errorFunction(x);
  if (x > 27.3) return 0;
  // The remainder after n levels falls as e^(−2x√(2n)): this depth leaves less than 2⁻⁵⁶.
  const depth = Math.floor(200 / (x * x)) + 12;
  let fraction = x;
  for (let n = depth; n >= 1; n--) fraction = x + (n * 0.5) / fraction;
  return (reciprocalRootPi * exponential(-x * x, -productError(x, x))) / fraction;
}
