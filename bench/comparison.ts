import type { Spread } from "./spread.js";

/** What became of a case between two result files. */
export type Verdict = "faster" | "slower" | "within the noise" | "too few samples";

export interface Change {
  name: string;
  before: Spread;
  after: Spread;
  /** after ÷ before, of medians. */
  ratio: number;
  verdict: Verdict;
}

export interface Comparison {
  changes: Change[];
  /** Names that only one of the files has. */
  onlyBefore: string[];
  onlyAfter: string[];
}

/** Two processes differ by this much without any reason in the code: where memory and code happen to lie. */
export const leastChange = 0.03;
/** Quartiles of fewer samples say nothing. */
export const fewestSamples = 5;

/**
 * Half the width of the interval around a median: where the intervals of two medians do not overlap, they differ at about the 5 % level.
 *
 *     1.57 · (p75 − p25) ÷ √samples
 *
 * Source    McGill, Tukey, Larsen, Variations of Box Plots, The American Statistician 32(1): 12–16, 1978 (the notches)
 */
export const halfWidth = ({ p25, p75, samples }: Pick<Spread, "p25" | "p75" | "samples">): number => (1.57 * (p75 - p25)) / Math.sqrt(samples);

/**
 * The rule: faster or slower where the intervals of the medians do not overlap and the medians differ by at least 3 %; else within the noise.
 */
export function verdictOf(before: Spread, after: Spread): Verdict {
  if (Math.min(before.samples, after.samples) < fewestSamples) return "too few samples";
  const apart = Math.abs(after.median - before.median) > halfWidth(before) + halfWidth(after);
  if (!apart || Math.abs(after.median / before.median - 1) < leastChange) return "within the noise";
  return after.median < before.median ? "faster" : "slower";
}

/** Properties that name what a record was measured on, outermost first. */
const labels = ["case", "work", "question", "name", "build", "method", "side"] as const;

const isSpread = (value: unknown): value is Spread =>
  typeof value === "object" &&
  value !== null &&
  ["median", "p25", "p75", "samples"].every((part) => typeof (value as Record<string, unknown>)[part] === "number");

/** Every spread of times in a result file, by the names on the way to it. A rank or a place in a list is no name: it may change. */
export function spreadsOf(result: unknown): Map<string, Spread> {
  const found = new Map<string, Spread>();
  const visit = (value: unknown, trail: readonly string[]): void => {
    if (typeof value !== "object" || value === null) return;
    if (Array.isArray(value)) return value.forEach((one) => visit(one, trail));
    const record = value as Record<string, unknown>;
    const own = labels.map((label) => record[label]).filter((label): label is string => typeof label === "string" && trail.at(-1) !== label);
    const here = [...trail, ...own];
    for (const [property, inner] of Object.entries(record)) {
      if (property === "host") continue;
      if (isSpread(inner)) found.set([...here, ...(property === "milliseconds" ? [] : [property])].join(" · "), inner);
      else visit(inner, here);
    }
  };
  visit(result, []);
  return found;
}

/** Case by case, largest change first. */
export function compareResults(before: unknown, after: unknown): Comparison {
  const old = spreadsOf(before);
  const now = spreadsOf(after);
  const changes = [...old].flatMap(([name, spread]): Change[] => {
    const later = now.get(name);
    return later ? [{ name, before: spread, after: later, ratio: later.median / spread.median, verdict: verdictOf(spread, later) }] : [];
  });
  return {
    changes: changes.toSorted((a, b) => Math.abs(Math.log(b.ratio)) - Math.abs(Math.log(a.ratio))),
    onlyBefore: [...old.keys()].filter((name) => !now.has(name)),
    onlyAfter: [...now.keys()].filter((name) => !old.has(name)),
  };
}
