import { ConvolutionError } from "../../errors.js";
import { checkOptionNames, chosenWord } from "../../kernels/options.js";
import { indexRuleNames } from "../../math/borders.js";
import { sampleFacts } from "../../planning/samples.js";
import type { BorderRule, SampleType } from "../../types.js";

const ruleNames = [...indexRuleNames, "zero", "renormalised"] as const;

/** What a border rule is checked against. */
export interface BorderContext {
  where: string;
  channels: number;
  sample: SampleType;
}

function checkedConstant(value: unknown, { where, channels, sample }: BorderContext): number | readonly number[] {
  const values = Array.isArray(value) ? (value as unknown[]) : [value];
  const { full, integer } = sampleFacts[sample];
  const range = integer ? `a whole number 0…${full}` : "a finite number";
  if (Array.isArray(value) && values.length !== channels) {
    const message = `${where}: border constant has ${values.length} values, the image has ${channels} channels. Give one number, or one for each channel.`;
    throw new ConvolutionError("invalid-constant", message, { expected: `${channels} values`, received: values.length });
  }
  for (const one of values) {
    const number = typeof one === "number" && Number.isFinite(Math.fround(one));
    if (number && (!integer || (Number.isInteger(one) && one >= 0 && one <= full))) continue;
    const message = `${where}: border constant ${String(one)} is no sample of a ${sample} image. Use ${range}, in the image's own units.`;
    throw new ConvolutionError("invalid-constant", message, { expected: range, received: one });
  }
  return Array.isArray(value) ? (values as number[]).slice() : (value as number);
}

function checkedRule(rule: unknown, context: BorderContext): BorderRule {
  if (typeof rule !== "object" || rule === null) return chosenWord(context.where, "border", rule, ruleNames);
  checkOptionNames(`${context.where}: border`, rule, ["constant"]);
  return { constant: checkedConstant((rule as { constant: unknown }).constant, context) };
}

/**
 * One rule for each axis.
 *
 * @throws ConvolutionError `unknown-value`, `unknown-option`, `invalid-constant`
 */
export function checkedBorder(border: unknown, context: BorderContext): { rows: BorderRule; columns: BorderRule } {
  if (border === undefined) return { rows: "replicate", columns: "replicate" };
  if (typeof border !== "object" || border === null || "constant" in border) {
    const rule = checkedRule(border, context);
    return { rows: rule, columns: rule };
  }
  checkOptionNames(`${context.where}: border`, border, ["rows", "columns", "constant"]);
  const { rows = "replicate", columns = "replicate" } = border as { rows?: unknown; columns?: unknown };
  return { rows: checkedRule(rows, context), columns: checkedRule(columns, context) };
}
