import ts from "typescript";
import { describe, expect, test } from "vitest";
import { parse, place, sourcesBelow, visit, type Source } from "./sources.js";

/**
 * Members of Math whose value the language fixes to the last bit; the others are "implementation-approximated".
 * Source    ECMA-262, 2024 edition, §21.3 (The Math Object)
 */
const exact = ["abs", "ceil", "clz32", "floor", "fround", "imul", "max", "min", "round", "sign", "sqrt", "trunc"].concat(
  "E LN10 LN2 LOG10E LOG2E PI SQRT1_2 SQRT2".split(" "),
);

const powers = [ts.SyntaxKind.AsteriskAsteriskToken, ts.SyntaxKind.AsteriskAsteriskEqualsToken];

function isExactMember(node: ts.Identifier): boolean {
  const { parent } = node;
  return ts.isPropertyAccessExpression(parent) && parent.expression === node && exact.includes(parent.name.text);
}

/** Places where a result could differ between JavaScript engines. */
function engineDependent(source: Source): string[] {
  const found: string[] = [];
  visit(source.tree, (node) => {
    const isPower = ts.isBinaryExpression(node) && powers.includes(node.operatorToken.kind);
    const isMath = ts.isIdentifier(node) && node.text === "Math" && !(ts.isPropertyAccessExpression(node.parent) && node.parent.name === node);
    if (isPower || (isMath && !isExactMember(node))) found.push(`${place(source, node)}: ${node.parent.getText().slice(0, 60)}`);
  });
  return found;
}

describe("the library computes the same in every JavaScript engine", () => {
  /** What computes no sample of a result may use any arithmetic. */
  const beside = ["src/cli/", "src/report/", "src/measure/"];
  const library = sourcesBelow("src").filter(({ path }) => !beside.some((folder) => path.startsWith(folder)));

  test("no engine-dependent function or power is used", () => {
    expect(library.length).toBeGreaterThan(20);
    expect(library.flatMap(engineDependent)).toEqual([]);
  });

  test.each(["Math.sin(x)", "x ** 2", "x **= 2", 'Math["exp"](x)', "const { pow } = Math", "Math.hypot(x, y)", "[1].map(Math.cbrt)", "Math.random()"])(
    "%s is found",
    (text) => {
      expect(engineDependent(parse("src/math/sample.ts", text))).toHaveLength(1);
    },
  );

  test.each(["Math.sqrt(x)", "Math.PI", "x * x", "own.Math.sin(x)", "// Math.sin(x)", '"Math.sin"'])("%s is allowed", (text) => {
    expect(engineDependent(parse("src/math/sample.ts", text))).toEqual([]);
  });
});
