import { existsSync, readFileSync } from "node:fs";
import { dirname, join, relative } from "node:path";
import { fileURLToPath } from "node:url";
import { describe, expect, test } from "vitest";
import { anchorsOf, linksOf } from "./markdown.js";

const root = join(dirname(fileURLToPath(import.meta.url)), "..", "..");
const pages = ["README.md", "DEVELOPERS.md", "CHANGELOG.md"];

/** What is wrong with a link of a page, or undefined. Addresses of other hosts are not looked at. */
function fault(page: string, text: string, link: string): string | undefined {
  if (/^[a-z][a-z+.-]*:/i.test(link)) return undefined;
  const [path = "", anchor] = link.split("#");
  const target = path === "" ? join(root, page) : join(root, dirname(page), decodeURIComponent(path));
  if (!existsSync(target)) return `${page}: ${link} leads to no file`;
  if (relative(root, target).startsWith("..")) return `${page}: ${link} leads out of the repository`;
  if (anchor === undefined || !target.endsWith(".md")) return undefined;
  const anchors = anchorsOf(path === "" ? text : readFileSync(target, "utf8"));
  return anchors.includes(anchor) ? undefined : `${page}: ${link} leads to no heading`;
}

function faultsOf(page: string, text: string): string[] {
  return linksOf(text)
    .map((link) => fault(page, text, link))
    .filter((found) => found !== undefined);
}

describe("links within the documents", () => {
  test.each(pages)("%s: each leads to a file and a heading that exist", (page) => {
    expect(faultsOf(page, readFileSync(join(root, page), "utf8"))).toEqual([]);
  });

  test("a missing file and a missing heading are found, code is not read as links", () => {
    const text = "# One `word`, two\n[a](#one-word-two) [b](#two) [c](nowhere.md) [d](https://example.org/x) `[e](gone.md)`\n```md\n[f](gone.md)\n```\n";
    expect(faultsOf("README.md", text)).toEqual(["README.md: #two leads to no heading", "README.md: nowhere.md leads to no file"]);
  });
});
