import type { Engine } from "../../src/index.js";
import { meanOf, type ContestResult, type Mean } from "../contest.js";

/** What every group of yardsticks gets. */
export interface Ground {
  engine: Engine;
  /** For what yardsticks read and write. */
  folder: string;
  /** Tools that were found, by name, with their versions: gcc, fftw, scipy … */
  tools: Readonly<Record<string, string | undefined>>;
  /** Prints a line at once: what is skipped, what takes a while. */
  say(line: string): void;
}

export interface GroupResult {
  contests: ContestResult[];
  means: Mean[];
  /** What else was found out, for the result file. */
  notes: Record<string, unknown>;
}

/** One group of lines of the table; `npm run bench:yardsticks -- <name>` runs it alone. */
export interface Group {
  name: string;
  title: string;
  measure(ground: Ground): Promise<GroupResult>;
  /** Compiles what `measure` will start, where that takes long. */
  compile?(): void;
}

export const nothing = (): GroupResult => ({ contests: [], means: [], notes: {} });

/** Contests of one kind with their mean. */
export const together = (name: string, contests: ContestResult[], bar?: number): GroupResult => ({
  contests,
  means: contests.length > 1 ? [meanOf(`geometric mean, ${name}`, contests, bar)] : [],
  notes: {},
});

export const joined = (parts: readonly GroupResult[]): GroupResult => ({
  contests: parts.flatMap(({ contests }) => contests),
  means: parts.flatMap(({ means }) => means),
  notes: Object.assign({}, ...parts.map(({ notes }) => notes)) as Record<string, unknown>,
});
