import type { Method } from "../index.js";
import type { Crossover, CrossoverRow } from "../measure/types.js";
import { bySide, percent, threeDigits } from "./figures.js";
import { methodOrder, shortName } from "./methodNames.js";

/** One kernel size of the table, as text. */
export interface TableRow {
  /** "9×9". */
  size: string;
  /** Milliseconds of each of the table's methods, with three digits, and the quartiles as "4.21 … 4.75"; "" where there is none. */
  times: { measured: string; predicted: string; middleHalf: string }[];
  fastest: string;
  chosen: string;
  /** Per cent. */
  regret: string;
  /** Whether there is any. */
  costs: boolean;
}

/** A crossover as rows for people; all times are milliseconds. */
export interface CrossoverTable {
  /** Methods that were timed or predicted, in the order of the columns. */
  methods: Method[];
  /** By size. */
  rows: TableRow[];
}

/** Rows for people, for any kind of table. */
export function crossoverTable({ rows }: Crossover): CrossoverTable {
  const methods = methodOrder.filter((method) => rows.some(({ milliseconds, predicted }) => (milliseconds[method] ?? predicted[method]) !== undefined));
  return { methods, rows: rows.toSorted((a, b) => a.size - b.size).map((row) => tableRow(row, methods)) };
}

function tableRow(row: CrossoverRow, methods: readonly Method[]): TableRow {
  const text = (time: number | undefined): string => (time === undefined ? "" : threeDigits(time));
  return {
    size: bySide(row.size),
    times: methods.map((method) => ({
      measured: text(row.milliseconds[method]),
      predicted: text(row.predicted[method]),
      middleHalf: between(row.quartiles[method]),
    })),
    fastest: shortName(row.fastest),
    chosen: shortName(row.chosen),
    regret: percent(row.regret),
    costs: row.regret > 0,
  };
}

/** Both ends, where three digits tell them apart: of a method that was timed once they are one. */
function between(quartiles: readonly [number, number] | undefined): string {
  const [low = "", high = ""] = quartiles?.map(threeDigits) ?? [];
  return low === high ? "" : `${low} … ${high}`;
}

/**
 * The table for a terminal: two lines of headings, sizes and words set left, figures right.
 *
 *            direct, ms           FFT, ms
 *     taps   measured  predicted  measured  predicted  fastest  chosen  regret
 *     9×9        3.21       3.40      4.56       4.41  direct   direct     0 %
 */
export function textTable(crossover: Crossover): string {
  const { methods, rows } = crossoverTable(crossover);
  const above = ["", ...methods.flatMap((method) => [`${shortName(method)}, ms`, ""]), "", "", ""];
  const headings = ["taps", ...methods.flatMap(() => ["measured", "predicted"]), "fastest", "chosen", "regret"];
  const body = rows.map(({ size, times, fastest, chosen, regret }) => [
    size,
    ...times.flatMap(({ measured, predicted }) => [measured || "–", predicted || "–"]),
    fastest,
    chosen,
    regret,
  ]);
  const widths = headings.map((heading, column) => Math.max(heading.length, ...body.map((cells) => cells[column]!.length)));
  const isFigure = (column: number): boolean => headings[column] === "regret" || (column > 0 && column <= 2 * methods.length);
  const line = (cells: readonly string[]): string =>
    cells.map((cell, column) => (isFigure(column) ? cell.padStart(widths[column]!) : cell.padEnd(widths[column]!))).join("  ");
  // A method's name may be wider than its first column: it stands over both.
  const groups = methods.map((_, k) => above[1 + 2 * k]!.padEnd(widths[1 + 2 * k]! + 2 + widths[2 + 2 * k]!));
  const top = ["".padEnd(widths[0]!), ...groups].join("  ");
  return [top, line(headings), ...body.map(line)].map((one) => one.trimEnd()).join("\n");
}
