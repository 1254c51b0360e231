import type { Crossover } from "../../measure/types.js";
import { shortName } from "../methodNames.js";
import { crossoverTable, type TableRow } from "../table.js";
import { escaped, scrolling } from "./markup.js";

const caption = "Milliseconds of one run";

/** All kernel sizes as an HTML table: the chart's equivalent in figures. Escaped, without style. */
export function sizeTable(crossover: Crossover): string {
  const { methods, rows } = crossoverTable(crossover);
  const groups = methods.map((method) => `<th scope="colgroup" colspan="2" class="group">${escaped(shortName(method))}</th>`).join("");
  const words = [
    ["fastest", ' class="group"'],
    ["chosen", ""],
    ["regret", ' class="figure"'],
  ].map(([heading, style]) => `<th scope="col" rowspan="2"${style}>${heading}</th>`);
  const below = methods.map(() => `<th scope="col" class="figure group">measured</th><th scope="col" class="figure">predicted</th>`).join("");
  const columns = `<colgroup></colgroup>${methods.map(() => `<colgroup span="2"></colgroup>`).join("")}<colgroup span="3"></colgroup>`;
  const head = `<thead><tr><th scope="col" rowspan="2">kernel</th>${groups}${words.join("")}</tr><tr>${below}</tr></thead>`;
  const title = `<caption>${caption}</caption>`;
  return scrolling(
    `${caption}, as a table`,
    `<table class="${methods.length > 3 ? "sizes many" : "sizes"}">${title}${columns}${head}<tbody>\n${rows.map((row) => rowOf(row, methods.map(shortName))).join("\n")}\n</tbody></table>`,
  );
}

/** In bold: the fastest time, and regret. */
function rowOf({ size, times, fastest, chosen, regret, costs }: TableRow, names: readonly string[]): string {
  const cells = times.map(({ measured, predicted, middleHalf }, column) => {
    const spread = middleHalf === "" ? "" : `<small>${escaped(middleHalf)}</small>`;
    const time = names[column] === fastest ? `<b>${escaped(measured)}</b>` : escaped(measured || "–");
    return `<td class="figure group">${time}${spread}</td><td class="figure">${escaped(predicted || "–")}</td>`;
  });
  const words = `<td class="group">${escaped(fastest)}</td><td>${escaped(chosen)}</td><td class="figure">${costs ? `<b>${escaped(regret)}</b>` : escaped(regret)}</td>`;
  return `<tr><th scope="row">${escaped(size)}</th>${cells.join("")}${words}</tr>`;
}
