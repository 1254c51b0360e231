import type { Border, BorderRule } from "../index.js";
import { readNumber, refuseValue } from "./numbers.js";

const namedRules = ["replicate", "zero", "periodic", "half-sample-symmetric", "whole-sample-symmetric", "renormalised"] as const;

/** The rules as they are listed in the help. */
export const borderRuleForms: readonly string[] = [...namedRules, '"constant v"', '"constant v,v,v"'];

/** A border rule: a name, or "constant" with one value or one for each channel. @throws ConvolutionError `usage` */
export function borderRule(text: string, option: string): BorderRule {
  const [word, ...rest] = text.trim().split(/[\s=,]+/);
  const named = namedRules.find((name) => name === word);
  if (named !== undefined && rest.length === 0) return named;
  const values = rest.map(readNumber);
  if (word !== "constant" || values.length === 0 || !values.every((value) => value !== undefined))
    return refuseValue(option, text, `one of ${borderRuleForms.join(", ")}`);
  return { constant: values.length === 1 ? values[0]! : values };
}

/** The border of all sides, with a rule of its own for either axis. */
export function borderOf({
  border,
  borderRows,
  borderColumns,
}: {
  border?: BorderRule;
  borderRows?: BorderRule;
  borderColumns?: BorderRule;
}): Border | undefined {
  if (borderRows === undefined && borderColumns === undefined) return border;
  const rows = borderRows ?? border;
  const columns = borderColumns ?? border;
  return { ...(rows !== undefined && { rows }), ...(columns !== undefined && { columns }) };
}
