import { type Command, Option } from "commander";
import type { BorderRule, Channels, SampleType } from "../../index.js";
import { borderRule, borderRuleForms } from "../border.js";
import { type EngineArguments, addEngineOptions } from "../engineArguments.js";
import { numberOption, readNumber, refuseValue } from "../numbers.js";
import { readSize } from "../size.js";

/** The options of `measure`, as the parser hands them over. */
export interface MeasureArguments extends EngineArguments {
  size?: { width: number; height: number };
  channels?: `${Channels}`;
  sample?: SampleType;
  kernels?: "separable" | "unstructured";
  border?: BorderRule;
  sizes?: number[];
  seconds?: number;
  /** False with `--no-crossover`. */
  crossover: boolean;
  /** File that the profile is written to. */
  profile?: string;
  /** File that the report is written to. */
  report?: string;
  force?: true;
}

/** Adds the options of {@link MeasureArguments}. */
export function addMeasureOptions(command: Command): Command {
  command
    .option("--profile <file>", "write the profile as JSON, for --profile of filter and explain and for createEngine")
    .option("--report <file>", "write what was found as one HTML file: chart, table, profile")
    .option("--force", "replace files that exist")
    .option("--no-crossover", "measure the profile only")
    .option("--size <width>x<height>", "size of the images (default: 1920x1080)", readSize)
    .addOption(new Option("--channels <count>", "samples a pixel (default: 1)").choices(["1", "2", "3", "4"]))
    .addOption(new Option("--sample <type>", "samples of the images (default: u8)").choices(["u8", "u16", "f32"]))
    .addOption(
      new Option("--kernels <kind>", "separable: bells; unstructured: taps at random, for which no method has a short way (default: separable)").choices([
        "separable",
        "unstructured",
      ]),
    )
    .option("--border <rule>", `what images are outside themselves: ${borderRuleForms.join(", ")} (default: replicate)`, (text) => borderRule(text, "--border"))
    .option("--sizes <list>", "kernel sizes in taps a side, odd ones, such as 3,5,9,17 (default: 3, 5, 7 … 127)", readSizes)
    .option("--seconds <time>", "about how long to measure: a sixth for the profile, the rest for the crossings (default: 12)", readSeconds);
  return addEngineOptions(command).option("--json", "print one JSON object for programs, errors too");
}

const sizesForm = "odd whole numbers 1…1023, such as 3,5,9,17";

function readSizes(text: string): number[] {
  const sizes = text
    .trim()
    .split(/\s*,\s*|\s+/)
    .map(readNumber);
  const isSize = (size: number | undefined): size is number => size !== undefined && size % 2 === 1 && size >= 1 && size <= 1023;
  return sizes.every(isSize) ? sizes : refuseValue("--sizes", text, sizesForm);
}

function readSeconds(text: string): number {
  const seconds = numberOption(text, "--seconds");
  return seconds >= 0.1 && seconds <= 3600 ? seconds : refuseValue("--seconds", text, "a number of seconds 0.1…3600");
}
