import type { ContestResult, Mean } from "./contest.js";
import { digits, printTable } from "./table.js";

const verdictCells = (ratio: number, bar: number | null, verdict: ContestResult["verdict"]): string[] => [
  ratio.toFixed(2),
  bar === null ? "" : String(bar),
  bar === null ? "" : verdict,
];

/** Prints a group's lines, means last. */
export function printContests({ contests, means }: { contests: readonly ContestResult[]; means: readonly Mean[] }): void {
  if (contests.length === 0) return;
  printTable(
    ["work", "ms", "held against", "ms", "ratio", "at most", "", "turn by turn", "aside"],
    [
      ...contests.map(({ work, subject, rivals, ratio, bar, verdict, ratioByTurns, asides }) => [
        work,
        digits(subject.milliseconds.median),
        rivals[0]!.name,
        digits(rivals[0]!.milliseconds.median),
        ...verdictCells(ratio, bar, verdict),
        `${ratioByTurns[0].toFixed(2)}…${ratioByTurns[1].toFixed(2)}`,
        asides.map(({ name, milliseconds: { median } }) => `${name} ${digits(median)} (${(median / rivals[0]!.milliseconds.median).toFixed(2)})`).join("; "),
      ]),
      ...means.map(({ name, ratio, bar, verdict }) => [name, "", "", "", ...verdictCells(ratio, bar, verdict), "", ""]),
    ],
  );
}
