import type { Crossover } from "../../measure/types.js";
import { shortName } from "../methodNames.js";
import { crossoverTable, type TableRow } from "../table.js";
import { escaped, scrolling } from "./markup.js";

const caption = "Milliseconds of one run";

/** All kernel sizes as an HTML table: the chart's equivalent in figures. Escaped, without style. */
export function sizeTable(crossover: Crossover): string {
  const { methods, rows } = crossoverTable(crossover);
  const groups = methods.map((method) => `<th scope="colgroup" colspan="2" class="group">${escaped(shortName(method))}</th>`).join("");
  const words = ["fastest", "chosen", "regret"]
    .map((heading) => `<th scope="col" rowspan="2"${heading === "regret" ? ' class="figure"' : ""}>${heading}</th>`)
    .join("");
  const below = methods.map(() => `<th scope="col" class="figure group">measured</th><th scope="col" class="figure">predicted</th>`).join("");
  const columns = `<colgroup></colgroup>${methods.map(() => `<colgroup span="2"></colgroup>`).join("")}<colgroup span="3"></colgroup>`;
  const head = `<thead><tr><th scope="col" rowspan="2">kernel</th>${groups}${words}</tr><tr>${below}</tr></thead>`;
  const title = `<caption>${caption}: medians, and below them the middle half of the times that were measured</caption>`;
  return scrolling(caption, `<table class="sizes">${title}${columns}${head}<tbody>\n${rows.map(rowOf).join("\n")}\n</tbody></table>`);
}

function rowOf({ size, times, fastest, chosen, regret }: TableRow): string {
  const cells = times.map(({ measured, predicted, middleHalf }) => {
    const spread = middleHalf === "" ? "" : `<small>${escaped(middleHalf)}</small>`;
    return `<td class="figure group">${escaped(measured || "–")}${spread}</td><td class="figure">${escaped(predicted || "–")}</td>`;
  });
  const words = `<td>${escaped(fastest)}</td><td>${escaped(chosen)}</td><td class="figure">${escaped(regret)}</td>`;
  return `<tr><th scope="row">${escaped(size)}</th>${cells.join("")}${words}</tr>`;
}
