/** What a command has to say when it is done. */
export interface Report {
  /** For people, on standard output. */
  text: string;
  /** Sentences beside the point, for people on standard error, one a line. */
  notes: readonly string[];
  /** The same for programs, with `--json`: one object on standard output. */
  data: object;
  /** Where it is not that of a command that is done. */
  exitCode?: number;
}

/** One JSON object. What JSON has no number for (NaN, ±∞) is written as a word. */
export function asJson(data: object): string {
  return `${JSON.stringify(data, (_, value: unknown) => (typeof value === "number" && !Number.isFinite(value) ? String(value) : value), 2)}\n`;
}

/** Milliseconds with three digits. */
export function asMilliseconds(value: number): string {
  return `${value >= 100 ? value.toFixed(0) : value.toPrecision(3)} ms`;
}

/** Seconds, with minutes where there are some. */
export function asSeconds(milliseconds: number): string {
  const seconds = milliseconds / 1000;
  if (seconds < 100) return `${seconds.toFixed(1)} s`;
  return `${Math.floor(seconds / 60)} min ${Math.round(seconds % 60)} s`;
}

/** A line with names in it as a terminal can show it: characters that would steer the terminal are spelled out. */
export function printable(line: string): string {
  // oxlint-disable-next-line no-control-regex -- control characters are what is looked for
  return line.replaceAll(/[\u0000-\u001f\u007f-\u009f]/g, (character) => `\\x${character.charCodeAt(0).toString(16).padStart(2, "0")}`);
}
