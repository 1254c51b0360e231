import { fastest, inTurns, warm, type Contender } from "./contender.js";
import { planeCount } from "./inputs.js";
import { spreadOf, type Spread } from "./spread.js";

/** One side of a contest, measured. */
export interface Side {
  name: string;
  milliseconds: Spread;
  /** From the definition, in units of the result; nothing where another side's check covers it. */
  largestDifference?: number;
}

/** A line of the table: ours against the best of others. */
export interface Contest {
  work: string;
  subject: Contender;
  rivals: readonly Contender[];
  /** Told for information: other ways to run ours. */
  asides?: readonly Contender[];
  /** The subject's time is compared with the rival's times this: 1 unless samples differ. */
  weight?: number;
  /** Rivals that are measured to the end, the fastest at a look: 3 unless given. */
  shortlist?: number;
  /** Largest ratio that is good enough; absent where it is told for information. */
  bar?: number;
}

export interface ContestResult {
  work: string;
  ratio: number;
  /** Quartiles of the ratios turn by turn. */
  ratioByTurns: [number, number];
  bar: number | null;
  verdict: "pass" | "MISS" | "for information";
  subject: Side;
  /** The fastest first. */
  rivals: Side[];
  asides: Side[];
}

/** Repetitions of every contest. */
export const turns = 21;

const rounded = (ratio: number): number => Number(ratio.toFixed(3));

const verdictOf = (ratio: number, bar: number | undefined): ContestResult["verdict"] =>
  bar === undefined ? "for information" : ratio <= bar ? "pass" : "MISS";

/** Runs all sides in turns and compares medians. Every side that is measured is verified. */
export async function hold({ work, subject, rivals, asides = [], weight = 1, shortlist = 3, bar }: Contest): Promise<ContestResult> {
  const chosen = await fastest(rivals, planeCount, shortlist);
  const contenders = [subject, ...chosen, ...asides];
  await warm(contenders, planeCount);
  const times = await inTurns(contenders, planeCount, turns);
  const sides: Side[] = [];
  for (const [index, contender] of contenders.entries()) {
    const largestDifference = await contender.verify?.();
    sides.push({ name: contender.name, milliseconds: spreadOf(times[index]!), ...(largestDifference === undefined ? {} : { largestDifference }) });
  }
  const best = chosen.reduce((least, _, index) => (sides[index + 1]!.milliseconds.median < sides[least + 1]!.milliseconds.median ? index : least), 0);
  const ratio = sides[0]!.milliseconds.median / (sides[best + 1]!.milliseconds.median * weight);
  const byTurns = spreadOf(times[0]!.map((ours, turn) => ours / (times[best + 1]![turn]! * weight)));
  return {
    work,
    ratio: rounded(ratio),
    ratioByTurns: [rounded(byTurns.p25), rounded(byTurns.p75)],
    bar: bar ?? null,
    verdict: verdictOf(ratio, bar),
    subject: sides[0]!,
    rivals: sides.slice(1, chosen.length + 1).toSorted((a, b) => a.milliseconds.median - b.milliseconds.median),
    asides: sides.slice(chosen.length + 1),
  };
}

/** The geometric mean of a table's ratios, against its own bar. */
export interface Mean {
  name: string;
  ratio: number;
  bar: number | null;
  verdict: ContestResult["verdict"];
}

export function meanOf(name: string, results: readonly ContestResult[], bar?: number): Mean {
  const ratio = Math.exp(results.reduce((sum, one) => sum + Math.log(one.ratio), 0) / results.length);
  return { name, ratio: rounded(ratio), bar: bar ?? null, verdict: verdictOf(ratio, bar) };
}
