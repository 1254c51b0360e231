import ts from "typescript";
import { describe, expect, test } from "vitest";
import { importsOf, parse, sourcesBelow, visit, type Source } from "./sources.js";

function isExported(node: ts.Statement): boolean {
  return ts.canHaveModifiers(node) && (ts.getModifiers(node) ?? []).some(({ kind }) => kind === ts.SyntaxKind.ExportKeyword);
}

function isType(node: ts.Statement): boolean {
  return ts.isInterfaceDeclaration(node) || ts.isTypeAliasDeclaration(node);
}

/**
 * Values that a file declares and exports; re-exports belong to the file that declares them. Types are left out: those of a
 * function's parameters and result are exported with it, so that a reader can name them.
 */
function declaredExports({ tree }: Source): string[] {
  return tree.statements
    .filter((node) => isExported(node) && !isType(node))
    .flatMap((statement) => {
      if (ts.isVariableStatement(statement)) return statement.declarationList.declarations.map(({ name }) => name.getText());
      const { name } = statement as ts.DeclarationStatement;
      return name === undefined ? [] : [name.getText()];
    });
}

/** "path name" of everything that a file takes from others; "path *" where it takes all. */
function taken(source: Source): string[] {
  const target = (specifier: ts.Expression | undefined): string =>
    specifier !== undefined && ts.isStringLiteral(specifier) ? (importsOf(parse(source.path, `import ${specifier.getText()};`))[0]?.to ?? "") : "";
  const found: string[] = [];
  visit(source.tree, (node) => {
    if (ts.isImportDeclaration(node)) {
      const bindings = node.importClause?.namedBindings;
      if (bindings !== undefined && ts.isNamedImports(bindings))
        found.push(...bindings.elements.map((one) => `${target(node.moduleSpecifier)} ${(one.propertyName ?? one.name).text}`));
      else found.push(`${target(node.moduleSpecifier)} *`);
    }
    if (ts.isExportDeclaration(node) && node.moduleSpecifier !== undefined) {
      const list = node.exportClause;
      if (list !== undefined && ts.isNamedExports(list))
        found.push(...list.elements.map((one) => `${target(node.moduleSpecifier)} ${(one.propertyName ?? one.name).text}`));
      else found.push(`${target(node.moduleSpecifier)} *`);
    }
    if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword) found.push(`${target(node.arguments[0])} *`);
    if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument)) found.push(`${target(node.argument.literal as ts.StringLiteral)} *`);
  });
  return found;
}

/** Exports of src/ that nobody takes. The public face is taken by users, the entry of the command line by nobody. */
function unused(sources: readonly Source[], readers: readonly Source[]): string[] {
  const uses = new Set(readers.flatMap(taken));
  return sources
    .filter(({ path }) => path !== "src/index.ts")
    .flatMap((source) => declaredExports(source).map((name) => ({ path: source.path, name })))
    .filter(({ path, name }) => !uses.has(`${path} ${name}`) && !uses.has(`${path} *`))
    .map(({ path, name }) => `${path}: ${name}`);
}

describe("nothing is exported for nobody", () => {
  test("every exported value of src/ is taken by another file", () => {
    expect(unused(sourcesBelow("src"), ["src", "test", "bench"].flatMap(sourcesBelow))).toEqual([]);
  });

  test("an export that nobody takes is found", () => {
    const source = parse("src/math/a.ts", "export const one = 1;\nexport function two() {}\nexport interface Three {}");
    expect(unused([source], [parse("src/math/b.ts", 'import { one as eins } from "./a.js";')])).toEqual(["src/math/a.ts: two"]);
    expect(unused([source], [parse("src/index.ts", 'export * from "./math/a.js";')])).toEqual([]);
  });
});
