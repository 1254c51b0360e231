import { readFileSync } from "node:fs";
import { join } from "node:path";
import ts from "typescript";
import { codeBlocksOf } from "../documents/markdown.js";
import { root, sourcesBelow, visit } from "../layers/sources.js";

/** A piece of documentation that a reader may copy. */
export interface Snippet {
  /** Where it stands, as path:line. */
  place: string;
  code: string;
  /** The module in whose comments it stands, if it does: its path from the root. */
  module?: string;
  /** Needs a page: its types are checked, but it is not run here. */
  pageOnly: boolean;
}

/** Blocks marked `ts` in a document; those marked `ts-page` need a page. */
function snippetsOfDocument(path: string): Snippet[] {
  return codeBlocksOf(readFileSync(join(root, path), "utf8"))
    .filter(({ language }) => language === "ts" || language === "ts-page")
    .map(({ language, code, line }) => ({ place: `${path}:${line}`, code, pageOnly: language === "ts-page" }));
}

function commentText(comment: ts.JSDocTag["comment"]): string {
  return ts.getTextOfJSDocComment(comment) ?? "";
}

/** The `@example` tags of a module's exported declarations and of their members. */
function snippetsOfModule(path: string, tree: ts.SourceFile): Snippet[] {
  const tags = new Set<ts.JSDocTag>();
  visit(tree, (node) => {
    for (const tag of ts.getJSDocTags(node)) if (tag.tagName.text === "example") tags.add(tag);
  });
  return [...tags].map((tag) => ({
    place: `${path}:${tree.getLineAndCharacterOfPosition(tag.getStart()).line + 1}`,
    code: commentText(tag.comment).replace(/^```\w*\n([\s\S]*)\n```$/, "$1"),
    module: path,
    pageOnly: false,
  }));
}

export function allSnippets(): Snippet[] {
  const library = sourcesBelow("src").filter(({ path }) => !path.startsWith("src/cli/"));
  return ["README.md", "DEVELOPERS.md"].flatMap(snippetsOfDocument).concat(library.flatMap(({ path, tree }) => snippetsOfModule(path, tree)));
}
