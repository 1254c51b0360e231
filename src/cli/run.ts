import { CommanderError } from "commander";
import { asConvolutionError, asData, exitCodeOf, exitCodes } from "./failure.js";
import { type Streams, makeProgram } from "./program.js";
import { type Report, asJson } from "./report.js";

/**
 * Runs one command line.
 *
 * @param argv the words after the program's name
 * @returns 0 done, 1 failed, 2 wrong usage, 128 + the signal's number when interrupted; never rejects
 */
export async function run(argv: readonly string[], { stdout, stderr }: Streams): Promise<number> {
  const json = argv.includes("--json");
  let exitCode: number = exitCodes.done;
  const deliver = (report: Report): void => {
    const { text, notes, data } = report;
    exitCode = report.exitCode ?? exitCodes.done;
    if (json) {
      stdout.write(asJson(data));
      return;
    }
    for (const note of notes) stderr.write(`${note}\n`);
    stdout.write(text);
  };
  try {
    await makeProgram({ stdout, stderr }, deliver).parseAsync(argv, { from: "user" });
    return exitCode;
  } catch (error) {
    if (error instanceof CommanderError && error.exitCode === 0) return exitCodes.done;
    // Without a command, the parser has printed the help on standard error.
    if (error instanceof CommanderError && error.code === "commander.help" && !json) return exitCodes.wrongUsage;
    const failure = asConvolutionError(error);
    if (json) stdout.write(asJson(asData(failure)));
    else stderr.write(`tapwise: ${failure.message} [${failure.code}]\n`);
    return exitCodeOf(failure);
  }
}
