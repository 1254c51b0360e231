import { readFileSync } from "node:fs";
import { Argument, Command, Option } from "commander";
import { addPlanOptions } from "./arguments.js";
import { explainPlan } from "./explainCommand.js";
import { filterPath } from "./filterCommand.js";
import { explainHelp, filterHelp, measureHelp, programHelp } from "./help.js";
import { addMeasureOptions } from "./measure/measureArguments.js";
import type { Report } from "./report.js";
import { readSize } from "./size.js";

/** Where a command line prints: `process` fits. */
export interface Streams {
  stdout: { write(text: string): unknown; columns?: number };
  stderr: { write(text: string): unknown; isTTY?: boolean; columns?: number };
}

/** Text of the help is set for this many columns, fewer on a narrower terminal. */
const helpColumns = 110;

/** The commands and their options; `deliver` takes what a command reports. */
export function makeProgram(streams: Streams, deliver: (report: Report) => void): Command {
  const { stdout, stderr } = streams;
  const program = new Command("tapwise")
    .description("Convolves PNG images. The fastest way for the kernel and the image is chosen and told; what is fastest here can be measured.")
    .version(packageVersion(), "-V, --version", "print the version")
    .helpOption("-h, --help", "print this help; after a command, the help of that command")
    .exitOverride()
    .configureOutput({
      writeOut: (text) => stdout.write(text),
      writeErr: (text) => stderr.write(text),
      outputError: () => undefined, // errors are reported in one place, for people or as JSON
      getOutHelpWidth: () => Math.min(stdout.columns ?? helpColumns, helpColumns),
      getErrHelpWidth: () => helpColumns,
    })
    .addHelpText("after", programHelp);
  addFilter(program, streams, deliver);
  addExplain(program, deliver);
  addMeasure(program, streams, deliver);
  return program;
}

function addFilter(program: Command, streams: Streams, deliver: (report: Report) => void): void {
  const command = program
    .command("filter")
    .summary("filter a PNG into another, or a folder of them")
    .description("Filters a PNG into another of the same kind: grey, grey with alpha, RGB or RGBA, 8 or 16 bits. Or those of a folder into another folder.")
    .argument("<input>", "PNG to read, or folder")
    .argument("<output>", "PNG to write, or folder")
    .option("--force", "replace outputs that exist");
  addPlanOptions(command, ["u8", "u16"])
    .addHelpText("after", filterHelp)
    .action(async (input: string, output: string, options) => deliver(await filterPath(input, output, options, streams)));
}

function addExplain(program: Command, deliver: (report: Report) => void): void {
  const command = program
    .command("explain")
    .summary("say how a kernel would be computed, and why")
    .description("Says how a kernel would be computed for an image, what each method would cost, and why. Nothing is filtered.")
    .addArgument(new Argument("[image]", "PNG whose size, channels and depth count; or give --size"))
    .option("--size <width>x<height>", "size of the image, such as 1920x1080", readSize)
    .addOption(new Option("--channels <count>", "samples a pixel (default: 1)").choices(["1", "2", "3", "4"]))
    .addOption(new Option("--sample <type>", "samples of the image (default: u8)").choices(["u8", "u16", "f32"]));
  addPlanOptions(command, ["u8", "u16", "f32"])
    .addHelpText("after", explainHelp)
    .action(async (image: string | undefined, options) => deliver(await explainPlan(image, options)));
}

function addMeasure(program: Command, streams: Streams, deliver: (report: Report) => void): void {
  const command = program
    .command("measure")
    .summary("measure which method is fastest on this machine, and from which kernel size on")
    .description(
      "Measures on this machine what each operation costs (the profile), and then how long each method takes for small to large kernels: where one overtakes another, and how good the choice by the profile is.",
    );
  addMeasureOptions(command)
    .addHelpText("after", measureHelp)
    .action(async (options) => {
      // What draws the report takes longer to load than filtering a small image takes.
      const { measure } = await import("./measure/measureCommand.js");
      deliver(await measure(options, streams));
    });
}

/** package.json lies two folders above this code, in the repository and in the package alike. */
function packageVersion(): string {
  const content = JSON.parse(readFileSync(new URL("../../package.json", import.meta.url), "utf8")) as { version: string };
  return content.version;
}
