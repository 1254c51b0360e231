/**
 * The smallest number of insertions, deletions, replacements and swaps of neighbours that turn one word into another.
 *
 * Source  Damerau, A technique for computer detection and correction of spelling errors, CACM 7(3), 1964 (optimal string alignment)
 */
export function editDistance(from: string, to: string): number {
  const rows = from.length + 1;
  const columns = to.length + 1;
  const distance = new Array<number>(rows * columns).fill(0);
  for (let r = 0; r < rows; r++) distance[r * columns] = r;
  for (let c = 0; c < columns; c++) distance[c] = c;
  for (let r = 1; r < rows; r++) {
    for (let c = 1; c < columns; c++) {
      const at = r * columns + c;
      const replaced = distance[at - columns - 1]! + (from[r - 1] === to[c - 1] ? 0 : 1);
      let least = Math.min(replaced, distance[at - columns]! + 1, distance[at - 1]! + 1);
      const swapped = r > 1 && c > 1 && from[r - 1] === to[c - 2] && from[r - 2] === to[c - 1];
      if (swapped) least = Math.min(least, distance[at - 2 * columns - 2]! + 1);
      distance[at] = least;
    }
  }
  return distance[rows * columns - 1]!;
}

/**
 * The name that was probably meant, or nothing where none is close: upper and lower case and separators do not count,
 * a beginning of at least three letters counts as close, and otherwise at most one edit for each three letters.
 *
 * @example
 * nearestName("bordr", ["border", "extent"]); // "border"
 */
export function nearestName(given: string, names: readonly string[]): string | undefined {
  const wanted = folded(given);
  let nearest: string | undefined;
  let leastDistance = Infinity;
  for (const name of names) {
    const candidate = folded(name);
    const begins = wanted.length >= 3 && candidate.startsWith(wanted);
    const distance = begins ? 0.5 : editDistance(wanted, candidate);
    const allowed = Math.max(1, Math.floor(Math.max(wanted.length, candidate.length) / 3));
    if (distance <= allowed && distance < leastDistance) {
      nearest = name;
      leastDistance = distance;
    }
  }
  return nearest;
}

/** Only the first 64 letters are compared: a name is never longer, and what was given may be anything. */
function folded(name: string): string {
  return name
    .slice(0, 64)
    .toLowerCase()
    .replaceAll(/[-_\s]/g, "");
}
