import { execFileSync } from "node:child_process";
import { readFileSync } from "node:fs";
import { basename, join } from "node:path";
import ts from "typescript";
import { describe, expect, test } from "vitest";
import { importsOf, parse, place, root, sourcesBelow, visit, type Source } from "./sources.js";

const sources = sourcesBelow("src");
const library = sources.filter(({ path }) => !path.startsWith("src/cli/"));
const topLevel = [
  "package.json",
  "package-lock.json",
  "asconfig.json",
  "README.md",
  "DEVELOPERS.md",
  "LICENSE",
  "CHANGELOG.md",
  "assembly",
  "src",
  "bench",
  "test",
];
const toolConfig = /^(\..+|tsconfig(\.\w+)?\.json|\w+\.config\.ts)$/;

/** Statements that do something when a module is loaded. */
function loadTimeEffects(source: Source): string[] {
  const declares = (statement: ts.Statement): boolean =>
    ts.isImportDeclaration(statement) ||
    ts.isExportDeclaration(statement) ||
    ts.isFunctionDeclaration(statement) ||
    ts.isClassDeclaration(statement) ||
    ts.isInterfaceDeclaration(statement) ||
    ts.isTypeAliasDeclaration(statement) ||
    ts.isVariableStatement(statement);
  return source.tree.statements.filter((statement) => !declares(statement)).map((statement) => place(source, statement));
}

/** Words that a file uses outside comments and strings. */
function identifiers(source: Source): Set<string> {
  const words = new Set<string>();
  visit(source.tree, (node) => {
    if (ts.isIdentifier(node)) words.add(node.text);
  });
  return words;
}

/** Places where a member of a vector type is used: `f32x4.add`, `v128.load` and so on. */
function computations(source: Source, vectors: RegExp): string[] {
  const found: string[] = [];
  visit(source.tree, (node) => {
    if (ts.isPropertyAccessExpression(node) && ts.isIdentifier(node.expression) && vectors.test(node.expression.text)) found.push(place(source, node));
  });
  return found;
}

/** Variables of a module: state that would outlive a call. */
function moduleVariables(source: Source): string[] {
  const isVariable = (statement: ts.Statement): boolean => ts.isVariableStatement(statement) && (statement.declarationList.flags & ts.NodeFlags.Const) === 0;
  return source.tree.statements.filter(isVariable).map((statement) => place(source, statement));
}

function relativeWithoutExtension(source: Source): string[] {
  return importsOf(source)
    .filter(({ to }) => to.startsWith("src/") && !/\.(ts|json)$/.test(to))
    .map(({ from, to }) => `${from} imports ${to}`);
}

describe("the house is as drawn", () => {
  test("the top level holds what it should and nothing else", () => {
    const tracked = execFileSync("git", ["ls-files"], { cwd: root, encoding: "utf8" }).trim().split("\n");
    const names = [...new Set(tracked.map((path) => path.split("/")[0] ?? ""))];
    expect(names.length).toBeGreaterThan(8);
    expect(names.filter((name) => !topLevel.includes(name) && !toolConfig.test(name))).toEqual([]);
  });

  test("the package has no runtime dependency, and every development dependency is pinned", () => {
    const manifest = JSON.parse(readFileSync(join(root, "package.json"), "utf8"));
    for (const kind of ["dependencies", "peerDependencies", "optionalDependencies"]) expect(manifest[kind]).toBeUndefined();
    for (const [name, version] of Object.entries(manifest.devDependencies)) expect(`${name} ${version}`).toMatch(/ \d+\.\d+\.\d+$/);
  });

  test("no file is a bag of helpers", () => {
    const bags = [...sources, ...sourcesBelow("test"), ...sourcesBelow("bench")].filter(({ path }) =>
      /^(utils?|helpers?|misc|common)\.ts$/.test(basename(path)),
    );
    expect(bags.map(({ path }) => path)).toEqual([]);
  });

  test("importing the library does nothing; the script of a worker listens, and nobody imports it", () => {
    const script = "src/runtime/workers/worker.ts";
    expect(library.flatMap(loadTimeEffects).map((found) => found.split(":")[0])).toEqual([script]);
    expect(library.flatMap(importsOf).filter(({ to }) => to === script)).toEqual([]);
    expect(loadTimeEffects(parse("src/index.ts", "register();"))).toEqual(["src/index.ts:1"]);
  });

  test("the public face only re-exports", () => {
    const face = sources.find(({ path }) => path === "src/index.ts");
    expect(face?.tree.statements.filter((statement) => !ts.isExportDeclaration(statement)).map((statement) => statement.getText())).toEqual([]);
  });

  test("relative imports name the file as it is shipped", () => {
    expect(sources.flatMap(relativeWithoutExtension)).toEqual([]);
    expect(relativeWithoutExtension(parse("src/a.ts", 'import "./b";'))).toEqual(["src/a.ts imports src/b"]);
  });

  test("the library makes no code from text and prints nothing", () => {
    const forbidden = ["eval", "Function", "console", "require"];
    expect(library.flatMap((source) => forbidden.filter((word) => identifiers(source).has(word)).map((word) => `${source.path}: ${word}`))).toEqual([]);
  });
});

describe("the core is stateless", () => {
  const assembly = sourcesBelow("assembly");

  test("it imports nothing from outside its folder", () => {
    expect(assembly.length).toBeGreaterThan(5);
    expect(assembly.flatMap(importsOf).filter(({ to }) => !to.startsWith("assembly/"))).toEqual([]);
  });

  test("it keeps no variable between calls", () => {
    expect(assembly.flatMap(moduleVariables)).toEqual([]);
    expect(moduleVariables(parse("assembly/a.ts", "let calls = 0;"))).toEqual(["assembly/a.ts:1"]);
  });

  test("lanes.ts alone computes with vectors, and the entries alone choose which vector to work on", () => {
    const vectors = /^(v128|[iuf](8x16|16x8|32x4|64x2))$/;
    const spelling = assembly.filter((source) => [...identifiers(source)].some((word) => vectors.test(word)));
    const entries = ["assembly/index.ts", "assembly/testing.ts"];
    expect(spelling.map(({ path }) => path).sort()).toEqual(["assembly/lanes.ts", ...entries].sort());
    expect(assembly.filter(({ path }) => entries.includes(path)).flatMap((source) => computations(source, vectors))).toEqual([]);
    expect(computations(parse("assembly/a.ts", "const sum = f32x4.add(a, b);"), vectors)).toEqual(["assembly/a.ts:1"]);
  });
});
