/**
 * How much of the unit square around (x, y) a disk around (0, 0) covers.
 *
 *     area of {(s, t): s² + t² ≤ radius², |s − x| ≤ ½, |t − y| ≤ ½}
 *
 * Accuracy  ≤ max(1, radius) · 2⁻⁵¹
 * Requires  whole x, y ≥ 0, radius > 0
 */
export function diskCoverage(x: number, y: number, radius: number): number {
  const left = Math.max(0, x - 0.5);
  const top = Math.max(0, y - 0.5);
  // Squares on an axis are cut there and counted twice: within one quadrant the arc only falls.
  const parts = (x === 0 ? 2 : 1) * (y === 0 ? 2 : 1);
  return parts * quadrantCoverage(left, x + 0.5, top, y + 0.5, radius);
}

/** The same for the rectangle left ≤ s ≤ right, near ≤ t ≤ far in the quadrant s, t ≥ 0. */
function quadrantCoverage(left: number, right: number, near: number, far: number, radius: number): number {
  if (right * right + far * far <= radius * radius) return (right - left) * (far - near);
  if (left * left + near * near >= radius * radius) return 0;
  // The arc enters through the left or the far side and leaves through the right or the near one.
  const startsLeft = arc(left, radius) <= far;
  const startS = startsLeft ? left : arc(far, radius);
  const startT = startsLeft ? arc(left, radius) : far;
  const endsRight = arc(right, radius) >= near;
  const endS = endsRight ? right : arc(near, radius);
  const endT = endsRight ? arc(right, radius) : near;
  const full = (startS - left) * (far - near);
  const underChord = (endS - startS) * ((startT - near + (endT - near)) * 0.5);
  const chord = Math.sqrt((endS - startS) * (endS - startS) + (endT - startT) * (endT - startT));
  return full + underChord + circularSegment(chord, radius);
}

/** The other coordinate of the circle's point; −1 where there is none. */
function arc(coordinate: number, radius: number): number {
  return coordinate > radius ? -1 : Math.sqrt((radius - coordinate) * (radius + coordinate));
}

/**
 * The area between a chord and its arc.
 *
 *     R² · (asin s − s · √(1 − s²)) = 2R² · ∫₀ˢ t² / √(1 − t²) dt = 2R² · Σₙ C(2n, n) / 4ⁿ · s²ⁿ⁺³ / (2n + 3),   s = chord / 2R
 *
 * Requires  s² ≤ ½ (arcs up to a quarter of the circle): the terms at least halve
 */
function circularSegment(chord: number, radius: number): number {
  const s = chord / (2 * radius);
  let power = s * s * s;
  let sum = power / 3;
  for (let n = 1; power > 1e-19 * sum; n++) {
    power *= (s * s * (2 * n - 1)) / (2 * n);
    sum += power / (2 * n + 3);
  }
  return 2 * radius * radius * sum;
}
