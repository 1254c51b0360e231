/** Text as it may stand between tags and in quoted attributes. */
export function escaped(text: string): string {
  return text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;").replaceAll('"', "&quot;").replaceAll("'", "&#39;");
}

export function paragraph(text: string, className?: string): string {
  return `<p${className === undefined ? "" : ` class="${className}"`}>${escaped(text)}</p>`;
}

/** Terms and what they are. */
export function facts(pairs: readonly (readonly [term: string, text: string])[]): string {
  return `<dl>${pairs.map(([term, text]) => `<div><dt>${escaped(term)}</dt><dd>${escaped(text)}</dd></div>`).join("")}</dl>`;
}

export function list(sentences: readonly string[]): string {
  return `<ul>${sentences.map((sentence) => `<li>${escaped(sentence)}</li>`).join("")}</ul>`;
}

/** A part of the page that scrolls sideways where the page is narrower than it. */
export function scrolling(name: string, content: string): string {
  return `<div class="scroll" role="region" aria-label="${escaped(name)}" tabindex="0">${content}</div>`;
}

/** A column of a plain table. */
export interface Column {
  heading: string;
  isFigure?: boolean;
}

/** A table of text whose first column names its rows. */
export function plainTable(caption: string, columns: readonly Column[], rows: readonly (readonly string[])[]): string {
  const figure = (index: number): string => (columns[index]?.isFigure === true ? ' class="figure"' : "");
  const head = columns.map(({ heading }, index) => `<th scope="col"${figure(index)}>${escaped(heading)}</th>`).join("");
  const body = rows.map(
    ([first = "", ...others]) =>
      `<tr><th scope="row"${figure(0)}>${escaped(first)}</th>${others.map((cell, index) => `<td${figure(index + 1)}>${escaped(cell)}</td>`).join("")}</tr>`,
  );
  const table = `<table><caption>${escaped(caption)}</caption><thead><tr>${head}</tr></thead><tbody>\n${body.join("\n")}\n</tbody></table>`;
  return scrolling(caption, table);
}
