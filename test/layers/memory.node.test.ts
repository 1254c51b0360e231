import { join } from "node:path";
import ts from "typescript";
import { describe, expect, test } from "vitest";
import { place, root, sourcesBelow, visit } from "./sources.js";

const owner = "src/runtime/memory.ts";

function program(): ts.Program {
  const paths = sourcesBelow("src").map(({ path }) => join(root, path));
  const { config } = ts.readConfigFile(join(root, "tsconfig.json"), ts.sys.readFile);
  return ts.createProgram(paths, ts.convertCompilerOptionsFromJson(config.compilerOptions, root).options);
}

/** Places that take the buffer of a WebAssembly memory or make such a memory, decided by type and not by name. */
function memoryUses(): string[] {
  const compiled = program();
  const checker = compiled.getTypeChecker();
  const found: string[] = [];
  for (const { path } of sourcesBelow("src")) {
    const tree = compiled.getSourceFile(join(root, path));
    if (tree === undefined) throw new Error(`${path} was not compiled`);
    visit(tree, (node) => {
      const takesBuffer =
        ts.isPropertyAccessExpression(node) && node.name.text === "buffer" && checker.getTypeAtLocation(node.expression).symbol?.name === "Memory";
      const makesMemory = ts.isNewExpression(node) && node.expression.getText() === "WebAssembly.Memory";
      if (takesBuffer || makesMemory) found.push(place({ path, tree }, node));
    });
  }
  return found;
}

describe("memory has one owner", () => {
  test(`${owner} alone makes the engine's memory and reads its buffer`, () => {
    const uses = memoryUses();
    expect(uses.filter((use) => use.startsWith(`${owner}:`)).length).toBeGreaterThan(1);
    expect(uses.filter((use) => !use.startsWith(`${owner}:`))).toEqual([]);
  }, 60_000);
});
