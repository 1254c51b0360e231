/** Something that wants a place on a line, and the room that it takes there. */
interface Wish {
  /** Its middle. */
  at: number;
  extent: number;
}

/**
 * Moves middles apart as little as needed so that nothing overlaps and all stay between two ends: pushed on from the first, then back from
 * the last.
 *
 * @returns the middles, in the order of the wishes
 */
export function apart(wishes: readonly Wish[], [first, last]: [number, number]): number[] {
  const order = wishes.map((_, k) => k).toSorted((a, b) => wishes[a]!.at - wishes[b]!.at);
  const places = wishes.map(({ at }) => at);
  let free = first;
  for (const k of order) {
    const half = wishes[k]!.extent / 2;
    places[k] = Math.max(places[k]!, free + half);
    free = places[k]! + half;
  }
  free = last;
  for (const k of order.toReversed()) {
    const half = wishes[k]!.extent / 2;
    places[k] = Math.min(places[k]!, free - half);
    free = places[k]! - half;
  }
  return places;
}

/** A label like a flag on a pole: it begins at the pole, or where the drawing leaves room for it. */
export interface Flag {
  row: number;
  start: number;
  end: number;
}

/**
 * Puts flags into as few rows as needed, row 0 at the top: from left to right, each into the first row where it overlaps none before it.
 *
 * @param poles where each begins, and how long it is; from left to right
 */
export function flags(poles: readonly { at: number; extent: number }[], [first, last]: [number, number], gap: number): Flag[] {
  const ends: number[] = [];
  return poles.map(({ at, extent }) => {
    const start = Math.max(first, Math.min(at, last - extent));
    const fits = ends.findIndex((end) => end + gap <= start);
    const row = fits < 0 ? ends.length : fits;
    ends[row] = start + extent;
    return { row, start, end: start + extent };
  });
}
