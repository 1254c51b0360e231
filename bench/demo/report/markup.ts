/** Text as it may stand between tags and in quoted attributes. */
export function escaped(text: string): string {
  return text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;").replaceAll('"', "&quot;");
}

/** A table cell: a heading of its row, a figure aligned to the right, or words. */
export type Cell = string | { figure: string } | { heading: string };

/** A table under its title; it scrolls sideways where the page is narrower. Headings and cells are HTML. */
export function table(id: string, title: string, headings: readonly string[], rows: readonly (readonly Cell[])[]): string {
  const head = headings.map((heading) => `<th scope="col">${heading}</th>`).join("");
  const body = rows.map((row) => `<tr>${row.map(cell).join("")}</tr>`).join("\n");
  return `<p class="title" id="${id}">${escaped(title)}</p>
<div class="scroll" tabindex="0" role="group" aria-labelledby="${id}"><table aria-labelledby="${id}"><thead><tr>${head}</tr></thead><tbody>
${body}
</tbody></table></div>`;
}

function cell(content: Cell): string {
  if (typeof content === "string") return `<td>${content}</td>`;
  return "figure" in content ? `<td class="figure">${content.figure}</td>` : `<th scope="row">${content.heading}</th>`;
}
