import type { Crossover } from "../../../src/measure/index.js";
import { shortName } from "../../../src/report/methodNames.js";
import { crossoverTable, type TableRow } from "../../../src/report/table.js";

function cell(kind: "td" | "th", text: string, scope?: "row" | "col" | "colgroup"): HTMLTableCellElement {
  const made = document.createElement(kind);
  made.textContent = text;
  if (scope !== undefined) made.scope = scope;
  return made;
}

function row(...cells: readonly HTMLTableCellElement[]): HTMLTableRowElement {
  const made = document.createElement("tr");
  made.append(...cells);
  return made;
}

/** A time, and below it, smaller, what was predicted. */
function timeCell({ measured, predicted }: TableRow["times"][number]): HTMLTableCellElement {
  const made = cell("td", measured || "–");
  if (predicted === "") return made;
  const below = document.createElement("small");
  below.append(document.createElement("br"), predicted);
  made.append(below);
  return made;
}

/** The rows of a crossover: all that the chart shows, in figures. */
export function fillTable(table: HTMLTableElement, crossover: Crossover): void {
  const { methods, rows } = crossoverTable(crossover);
  const caption = document.createElement("caption");
  caption.textContent =
    "Milliseconds of one run by each method; below, smaller, what the profile predicted. Then the method that was fastest, the one that the engine would choose, and how much slower that is.";
  const head = document.createElement("thead");
  const headings = ["Taps", ...methods.map(shortName), "Fastest", "Chosen", "Slower by"];
  head.append(row(...headings.map((heading) => cell("th", heading, "col"))));
  const body = document.createElement("tbody");
  body.append(
    ...rows.map(({ size, times, fastest, chosen, regret }) =>
      row(cell("th", size, "row"), ...times.map(timeCell), cell("td", fastest), cell("td", chosen), cell("td", regret)),
    ),
  );
  table.replaceChildren(caption, head, body);
}
