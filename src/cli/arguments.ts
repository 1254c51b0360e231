import { type Command, Option } from "commander";
import type { Alpha, BorderRule, Extent, Light, Method, Origin, PrepareOptions, Region, SampleType } from "../index.js";
import { borderOf, borderRule, borderRuleForms } from "./border.js";
import { type EngineArguments, addEngineOptions } from "./engineArguments.js";
import { given } from "./given.js";
import type { KernelArguments } from "./kernelArgument.js";
import { numberOption, wholeNumbers } from "./numbers.js";

/** The options that `filter` and `explain` share, as the parser hands them over. */
export interface PlanArguments extends KernelArguments, EngineArguments {
  correlate?: true;
  border?: BorderRule;
  borderRows?: BorderRule;
  borderColumns?: BorderRule;
  extent?: Extent;
  region?: Region;
  method?: Method | "auto";
  tolerance?: number;
  alpha?: Alpha;
  light?: Light;
  outputSample?: SampleType;
  gain?: number;
  offset?: number;
  /** File that the engine's profile comes from. */
  profile?: string;
}

/** Adds the options of {@link PlanArguments}; results may be of the given sample types. */
export function addPlanOptions(command: Command, outputSamples: readonly SampleType[]): Command {
  const number = (name: string) => (text: string) => numberOption(text, name);
  const rule = (name: string) => (text: string) => borderRule(text, name);
  command
    .requiredOption("-k, --kernel <kernel>", "builder, taps, .json or .png file, see below")
    .option("--origin <x,y>", "tap that lies on the pixel computed (default: the middle one; of a PNG its centre of gravity)", readOrigin)
    .option("--kernel-background <levels>", "level of a PNG kernel without light, in its own units (default: 0)", number("--kernel-background"))
    .option("--kernel-as-stored", "do not divide the levels of a PNG kernel by their sum")
    .option("--correlate", "lay the taps on the image as written; else they are turned by 180°, as convolution does")
    .option("--border <rule>", `what the image is outside itself: ${borderRuleForms.join(", ")} (default: replicate)`, rule("--border"))
    .option("--border-rows <rule>", "another rule above and below", rule("--border-rows"))
    .option("--border-columns <rule>", "another rule left and right", rule("--border-columns"))
    .addOption(
      choice("--extent <extent>", "as large as the image, every place the kernel meets it, or where it lies inside (default: same)", ["same", "full", "valid"]),
    )
    .option("--region <x,y,width,height>", "compute this rectangle of the result only", readRegion)
    .addOption(
      choice("--method <method>", "how to compute it (default: auto, the fastest by measured costs)", ["auto", "direct", "separable", "fft", "running-sum"]),
    )
    .option("--tolerance <levels>", "what a method may add on purpose (default: 1/16 for 8-bit results, else 0)", number("--tolerance"))
    .addOption(
      choice(
        "--alpha <mode>",
        "straight: colours weigh by their alpha (default with alpha); premultiplied: they already do; keep: alpha stays; none: alpha is a channel like others",
        ["straight", "premultiplied", "keep", "none"],
      ),
    )
    .addOption(choice("--light <light>", "filter samples as stored, or sRGB decoded to linear light (default: encoded)", ["encoded", "linear"]))
    .addOption(choice("--output-sample <type>", "samples of the result (default: as the image); values are not rescaled, see --gain", outputSamples))
    .option("--gain <factor>", "result = gain · y + offset, such as 1/257 from 16 to 8 bits (default: 1)", number("--gain"))
    .option("--offset <levels>", "see --gain, such as 128 for signed results (default: 0)", number("--offset"))
    .option("--profile <file>", 'costs to choose by, as "tapwise measure --profile" wrote them (default: those of the package)');
  return addEngineOptions(command).option("--json", "print one JSON object for programs, errors too");
}

function choice(flags: string, description: string, words: readonly string[]): Option {
  return new Option(flags, description).choices(words);
}

function readOrigin(text: string): Origin {
  const [x, y] = wholeNumbers(text, 2, "--origin", "two whole numbers x,y");
  return { x: x!, y: y! };
}

function readRegion(text: string): Region {
  const [x, y, width, height] = wholeNumbers(text, 4, "--region", "four whole numbers x,y,width,height");
  return { x: x!, y: y!, width: width!, height: height! };
}

export function prepareOptionsOf(options: PlanArguments): PrepareOptions {
  const { correlate, extent, region, method, tolerance, alpha, light, outputSample, gain, offset } = options;
  const output = given({ sample: outputSample, gain, offset });
  return given({
    correlate,
    extent,
    region,
    method,
    tolerance,
    alpha,
    light,
    border: borderOf(options),
    output: Object.keys(output).length > 0 ? output : undefined,
  });
}
