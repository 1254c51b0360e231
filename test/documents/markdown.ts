/** A heading's address on the usual code hosting pages: lower case, spaces to hyphens, punctuation left out (common practice). */
function anchorOf(heading: string): string {
  const plain = heading.replaceAll(/\[([^\]]*)\]\([^)]*\)/g, "$1").replaceAll("`", "");
  return plain
    .trim()
    .toLowerCase()
    .replaceAll(/[^\p{L}\p{N}\s_-]/gu, "")
    .replaceAll(/\s/g, "-");
}

/** A page without its fenced code blocks and its code spans, in which links are no links. */
function withoutCode(markdown: string): string {
  return markdown.replaceAll(/^(`{3,}|~{3,})[^\n]*\n[\s\S]*?^\1[ \t]*$/gm, "").replaceAll(/(`+)[^`\n]+\1(?!`)/g, "code");
}

/** The anchors of a page, repeated headings numbered as -1, -2 … */
export function anchorsOf(markdown: string): string[] {
  const counts = new Map<string, number>();
  const fenceless = markdown.replaceAll(/^(`{3,}|~{3,})[^\n]*\n[\s\S]*?^\1[ \t]*$/gm, "");
  return [...fenceless.matchAll(/^#{1,6} +(.+?)\s*#*$/gm)].map(([, heading = ""]) => {
    const anchor = anchorOf(heading);
    const count = counts.get(anchor) ?? 0;
    counts.set(anchor, count + 1);
    return count === 0 ? anchor : `${anchor}-${count}`;
  });
}

/** Targets of links and pictures: inline, reference definitions and HTML attributes. */
export function linksOf(markdown: string): string[] {
  const text = withoutCode(markdown);
  const inline = [...text.matchAll(/\]\(\s*<?([^)\s>]+)>?(?:\s+"[^"]*")?\s*\)/g)];
  const definitions = [...text.matchAll(/^\s*\[[^\]]+\]:\s*(\S+)/gm)];
  const attributes = [...text.matchAll(/\b(?:src|href)="([^"]+)"/g)];
  return [...inline, ...definitions, ...attributes].map(([, target = ""]) => target);
}

/** Fenced code blocks with their language word. */
export function codeBlocksOf(markdown: string): { language: string; code: string; line: number }[] {
  return [...markdown.matchAll(/^```(\S*)[^\n]*\n([\s\S]*?)^```[ \t]*$/gm)].map((match) => ({
    language: match[1] ?? "",
    code: match[2] ?? "",
    line: markdown.slice(0, match.index).split("\n").length + 1,
  }));
}
