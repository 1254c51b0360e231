import { spawnSync } from "node:child_process";
import { mkdirSync, mkdtempSync, rmSync, symlinkSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { pathToFileURL } from "node:url";
import { PNG } from "pngjs";
import ts from "typescript";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { root } from "../layers/sources.js";
import { programOf } from "./program.js";
import { allSnippets, type Snippet } from "./snippets.js";

const folder = mkdtempSync(join(tmpdir(), "tapwise-examples-"));
const snippets = allSnippets();
const pathOf = (k: number): string => join(folder, `example${k}.ts`);
let program: ts.Program;
let outcomes: Record<string, string>;

async function namesExportedBy(path: string): Promise<Set<string>> {
  return new Set(Object.keys(await import(pathToFileURL(join(root, path)).href)));
}

/** A folder in which the repository is an installed package and two photographs lie. */
function furnish(): void {
  mkdirSync(join(folder, "node_modules", "@types"), { recursive: true });
  symlinkSync(root, join(folder, "node_modules", "tapwise"));
  for (const name of ["pngjs", "tsx", "@types/pngjs", "@types/node"]) symlinkSync(join(root, "node_modules", name), join(folder, "node_modules", name));
  writeFileSync(join(folder, "package.json"), '{ "type": "module" }');
  const photo = new PNG({ width: 64, height: 48 });
  photo.data.forEach((_, k) => (photo.data[k] = (k * 31) % 256));
  for (const name of ["photo.png", "pinhole.png"]) writeFileSync(join(folder, name), PNG.sync.write(photo));
}

async function writeProgram(snippet: Snippet, k: number): Promise<void> {
  const moduleNames = snippet.module === undefined ? new Set<string>() : await namesExportedBy(snippet.module);
  const faces = new Map([
    ["tapwise", await namesExportedBy("dist/index.js")],
    ["tapwise/measure", await namesExportedBy("dist/measure.js")],
  ]);
  writeFileSync(pathOf(k), programOf(snippet, faces, moduleNames));
}

/**
 * Runs the compiled examples one after the other in one process: what each threw, by its number. tsx serves those that describe a
 * module inside the house, which the package does not export and so is taken from src/.
 */
function runAll(): Record<string, string> {
  const numbers = snippets.flatMap((snippet, k) => (snippet.pageOnly ? [] : [k]));
  const runner = `const outcomes = {}; for (const k of ${JSON.stringify(numbers)}) { try { await import("./example" + k + ".js"); outcomes[k] = "done"; } catch (error) { outcomes[k] = String(error); } }
    (await import("node:fs")).writeFileSync("outcomes.json", JSON.stringify(outcomes));`;
  writeFileSync(join(folder, "run.js"), runner);
  const { status, stderr } = spawnSync(process.execPath, ["--import", "tsx", "run.js"], { cwd: folder, encoding: "utf8" });
  if (status !== 0) throw new Error(stderr);
  return JSON.parse(ts.sys.readFile(join(folder, "outcomes.json")) ?? "{}");
}

beforeAll(async () => {
  furnish();
  for (const [k, snippet] of snippets.entries()) await writeProgram(snippet, k);
  program = ts.createProgram(
    snippets.map((_, k) => pathOf(k)),
    {
      target: ts.ScriptTarget.ES2022,
      module: ts.ModuleKind.NodeNext,
      lib: ["lib.es2023.d.ts", "lib.dom.d.ts"],
      types: ["node"],
      typeRoots: [join(folder, "node_modules/@types")],
      strict: true,
      skipLibCheck: true,
    },
  );
  for (const k of snippets.keys()) program.emit(program.getSourceFile(pathOf(k)));
  outcomes = runAll();
}, 120_000);
afterAll(() => rmSync(folder, { recursive: true, force: true }));

test("the documents and the comments hold examples", () => {
  expect(snippets.filter(({ place }) => place.startsWith("README.md")).length).toBeGreaterThan(2);
  expect(snippets.filter(({ place }) => place.startsWith("src/")).length).toBeGreaterThan(10);
});

describe.each(snippets.map((snippet, k) => ({ ...snippet, k })))("$place", ({ k, pageOnly }) => {
  test("its types are right", () => {
    const file = program.getSourceFile(pathOf(k));
    const messages = [...program.getSyntacticDiagnostics(file), ...program.getSemanticDiagnostics(file)].map(({ messageText }) =>
      ts.flattenDiagnosticMessageText(messageText, "\n"),
    );
    expect(messages).toEqual([]);
  });

  if (pageOnly) return;
  test("it runs, and shows what it promises", () => {
    expect(outcomes[k]).toBe("done");
  });
});
