/**
 * The sRGB transfer curve (IEC 61966-2-1, as in CSS Color 4), continued past 1 and odd below 0.
 * Powers come from + − × ÷ √ alone, in double precision: the same bits in every JavaScript engine.
 */

/** x^(1/3), x > 0. The exponent is divided by three for a first guess; each Newton step doubles the digits. */
function cubeRoot(x: f64): f64 {
  let y = reinterpret<f64>(reinterpret<u64>(x) / 3 + 0x2a9f7893782da1ce);
  for (let k = 0; k < 5; k++) y -= (y - x / (y * y)) / 3;
  return y;
}

/** x^(1/5), x > 0. */
function fifthRoot(x: f64): f64 {
  let y = reinterpret<f64>(reinterpret<u64>(x) / 5 + 0x3325c28f5c28f5c3);
  for (let k = 0; k < 6; k++) {
    const square = y * y;
    y -= (y - x / (square * square)) / 5;
  }
  return y;
}

/**
 * Encoded → linear: c ÷ 12.92, or ((c + 0.055) ÷ 1.055)^2.4 with x^2.4 = x² · (x^(1/5))².
 *
 * Accuracy  within 1 ulp of float32; never falls
 * Source    IEC 61966-2-1
 */
export function decode(encoded: f32): f32 {
  const magnitude = abs<f64>(<f64>encoded);
  if (magnitude <= 0.04045) return <f32>(<f64>encoded / 12.92);
  if (!(magnitude < Infinity)) return encoded;
  const x = (magnitude + 0.055) / 1.055;
  const root = fifthRoot(x);
  return <f32>copysign<f64>(x * x * (root * root), encoded);
}

/**
 * Linear → encoded: 12.92 · l, or 1.055 · l^(1/2.4) − 0.055 with x^(5/12) = x^(1/3) · ((x^(1/3))^(1/2))^(1/2).
 *
 * Accuracy  within 1 ulp of float32; never falls, but for the step of −3·10⁻⁸ that the standard's own two pieces leave at 0.0031308
 * Source    IEC 61966-2-1
 */
export function encode(linear: f32): f32 {
  const magnitude = abs<f64>(<f64>linear);
  if (magnitude <= 0.0031308) return <f32>(12.92 * <f64>linear);
  if (!(magnitude < Infinity)) return linear;
  const root = cubeRoot(magnitude);
  return <f32>copysign<f64>(1.055 * (root * sqrt<f64>(sqrt<f64>(root))) - 0.055, linear);
}

/** Writes decode(code ÷ full) for code = 0 … full. */
export function decodeTable(out: usize, full: i32): void {
  assert(out != 0 && (out & 3) == 0 && full > 0);
  for (let code = 0; code <= full; code++) store<f32>(out + (<usize>code << 2), decode(<f32>(<f64>code / <f64>full)));
}
