import { readFileSync, readdirSync } from "node:fs";
import { dirname, join, posix } from "node:path";
import { fileURLToPath } from "node:url";
import ts from "typescript";

export const root: string = join(dirname(fileURLToPath(import.meta.url)), "..", "..");

/** A source file: its path from the top of the repository, with "/", and its syntax tree. */
export interface Source {
  path: string;
  tree: ts.SourceFile;
}

/** One way in which a file reaches another. */
export interface Import {
  from: string;
  /** A path from the top of the repository for relative imports, else the specifier as written. */
  to: string;
  typeOnly: boolean;
}

export function parse(path: string, text: string): Source {
  return { path, tree: ts.createSourceFile(path, text, ts.ScriptTarget.ES2022, true) };
}

/** All TypeScript files below a folder; src/generated is made by the build and left out. */
export function sourcesBelow(folder: string): Source[] {
  return readdirSync(join(root, folder), { recursive: true, encoding: "utf8" })
    .map((name) => `${folder}/${name.replaceAll("\\", "/")}`)
    .filter((path) => path.endsWith(".ts") && !path.startsWith("src/generated/"))
    .sort()
    .map((path) => parse(path, readFileSync(join(root, path), "utf8")));
}

/** Visits a node and everything below it. */
export function visit(node: ts.Node, found: (node: ts.Node) => void): void {
  found(node);
  node.forEachChild((child) => visit(child, found));
}

export function place(source: Source, node: ts.Node): string {
  return `${source.path}:${source.tree.getLineAndCharacterOfPosition(node.getStart()).line + 1}`;
}

function isTypeOnly(statement: ts.ImportDeclaration | ts.ExportDeclaration): boolean {
  if (ts.isExportDeclaration(statement)) return statement.isTypeOnly;
  const clause = statement.importClause;
  if (clause === undefined) return false;
  if (clause.phaseModifier === ts.SyntaxKind.TypeKeyword) return true;
  const named = clause.namedBindings;
  return (
    clause.name === undefined &&
    named !== undefined &&
    ts.isNamedImports(named) &&
    named.elements.length > 0 &&
    named.elements.every((element) => element.isTypeOnly)
  );
}

function resolved(from: string, specifier: string): string {
  if (!specifier.startsWith(".")) return specifier;
  return posix.join(posix.dirname(from), specifier).replace(/\.js$/, ".ts");
}

/** Static and dynamic imports and re-exports of a file. */
export function importsOf(source: Source): Import[] {
  const found: Import[] = [];
  const add = (specifier: ts.Node | undefined, typeOnly: boolean): void => {
    if (specifier !== undefined && ts.isStringLiteral(specifier)) found.push({ from: source.path, to: resolved(source.path, specifier.text), typeOnly });
  };
  visit(source.tree, (node) => {
    if (ts.isImportDeclaration(node) || ts.isExportDeclaration(node)) add(node.moduleSpecifier, isTypeOnly(node));
    if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword) add(node.arguments[0], false);
    if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument)) add(node.argument.literal, true);
  });
  return found;
}
