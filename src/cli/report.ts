/** What a command has to say when it is done. */
export interface Report {
  /** For people, on standard output. */
  text: string;
  /** Sentences beside the point, for people on standard error, one a line. */
  notes: readonly string[];
  /** The same for programs, with `--json`: one object on standard output. */
  data: object;
}

/** One JSON object. What JSON has no number for (NaN, ±∞) is written as a word. */
export function asJson(data: object): string {
  return `${JSON.stringify(data, (_, value: unknown) => (typeof value === "number" && !Number.isFinite(value) ? String(value) : value), 2)}\n`;
}

/** Milliseconds with three digits. */
export function asMilliseconds(value: number): string {
  return `${value >= 100 ? value.toFixed(0) : value.toPrecision(3)} ms`;
}
