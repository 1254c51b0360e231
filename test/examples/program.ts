import { join } from "node:path";
import ts from "typescript";
import { root, visit } from "../layers/sources.js";
import type { Snippet } from "./snippets.js";

/** Names that an example may use without saying where they come from, in the order in which they build on each other. */
const context: Record<string, string> = {
  engine: "const engine = await createEngine();",
  image: "const image = { data: Uint8ClampedArray.from({ length: 64 * 48 * 4 }, (_, k) => (k * 37) % 256), width: 64, height: 48 };",
  photo: "const photo = Uint8ClampedArray.from({ length: 640 * 480 * 4 }, (_, k) => (k * 29) % 256);",
  layout: 'const layout = { width: 1920, height: 1080, channels: 4, sample: "u8" } as const;',
  fitted: "const fitted = engine;",
  store:
    "const kept = new Map<string, string>(); const store = { getItem: (key: string) => kept.get(key) ?? null, setItem: (key: string, value: string) => void kept.set(key, value), removeItem: (key: string) => void kept.delete(key) };",
  report: "const report = (...values: unknown[]): unknown[] => values;",
};

function parsed(code: string): ts.SourceFile {
  return ts.createSourceFile("snippet.ts", code, ts.ScriptTarget.ES2022, true);
}

/** Names that a snippet declares or imports itself, and all names that it mentions. */
function namesOf(tree: ts.SourceFile): { own: Set<string>; mentioned: Set<string> } {
  const own = new Set<string>();
  const mentioned = new Set<string>();
  visit(tree, (node) => {
    if (ts.isIdentifier(node)) mentioned.add(node.text);
    const declares =
      ts.isVariableDeclaration(node) || ts.isImportSpecifier(node) || ts.isFunctionDeclaration(node) || ts.isParameter(node) || ts.isBindingElement(node);
    if (declares && node.name !== undefined && ts.isIdentifier(node.name)) own.add(node.name.text);
  });
  return { own, mentioned };
}

/** The value that a comment after an expression promises, where it is written as JSON. */
function promised(tree: ts.SourceFile, statement: ts.ExpressionStatement): string | undefined {
  const [comment] = ts.getTrailingCommentRanges(tree.text, statement.end) ?? [];
  if (comment === undefined) return undefined;
  const value = tree.text.slice(comment.pos + 2, comment.end).trim();
  try {
    JSON.parse(value);
    return value;
  } catch {
    return undefined;
  }
}

/** `expression; // value` becomes a comparison of the two. */
function withPromisesChecked(tree: ts.SourceFile): string {
  const promises: { start: number; end: number; value: string; expression: string }[] = [];
  visit(tree, (node) => {
    const value = ts.isExpressionStatement(node) ? promised(tree, node) : undefined;
    if (value !== undefined && ts.isExpressionStatement(node))
      promises.push({ start: node.getStart(), end: node.end, value, expression: node.expression.getText() });
  });
  let text = tree.text;
  for (const { start, end, value, expression } of promises.sort((a, b) => b.start - a.start)) {
    text = `${text.slice(0, start)}holds(${expression}, ${JSON.stringify(value)});${text.slice(end)}`;
  }
  return text;
}

/** Deep equality with a promised value; a promised fraction holds to half a unit of its last digit. */
const holds = `
function agrees(found: unknown, promise: unknown, slack: number): boolean {
  if (typeof found === "number" && typeof promise === "number") return Object.is(found, promise) || Math.abs(found - promise) <= slack;
  if (Array.isArray(promise)) {
    const list = Array.from(found as ArrayLike<unknown>);
    return list.length === promise.length && list.every((value, k) => agrees(value, promise[k], slack));
  }
  return JSON.stringify(found) === JSON.stringify(promise);
}
function holds(found: unknown, text: string): void {
  const digits = Math.max(0, ...[...text.matchAll(/\\.(\\d+)/g)].map((match) => (match[1] ?? "").length));
  if (!agrees(found, JSON.parse(text), digits === 0 ? 0 : 0.5 * 10 ** -digits)) throw new Error("promised " + text + ", found " + String(found));
}
`;

/**
 * A snippet as a module of its own: what it mentions and does not declare comes from the package and its sub-paths, from the module that it
 * describes, or from the context above.
 */
export function programOf(snippet: Snippet, faces: ReadonlyMap<string, ReadonlySet<string>>, moduleNames: ReadonlySet<string>): string {
  const tree = parsed(snippet.code);
  const { own, mentioned } = namesOf(tree);
  if (mentioned.has("fitted") && !own.has("fitted")) mentioned.add("engine");
  if (mentioned.has("engine") && !own.has("engine")) mentioned.add("createEngine");
  const lines = Object.entries(context).filter(([name]) => mentioned.has(name) && !own.has(name));
  const wanted = [...mentioned].filter((name) => !own.has(name));
  const imports: string[] = [];
  for (const [face, names] of faces) {
    const found = wanted.filter((name) => names.has(name));
    if (found.length > 0) imports.push(`import { ${found.join(", ")} } from ${JSON.stringify(face)};`);
  }
  const fromModule = wanted.filter((name) => moduleNames.has(name) && ![...faces.values()].some((names) => names.has(name)));
  if (fromModule.length > 0)
    imports.push(`import { ${fromModule.join(", ")} } from ${JSON.stringify(join(root, snippet.module ?? "").replace(/\.ts$/, ".js"))};`);
  return [...imports, ...lines.map(([, line]) => line), withPromisesChecked(tree), holds, "export {};"].join("\n");
}
