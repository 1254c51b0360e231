import { median } from "simple-statistics";
import type { ConvolutionError, HardwareProfile } from "../../index.js";
import type { Crossover } from "../../measure/index.js";
import { listed, percent } from "../../report/figures.js";
import { nodeDocument } from "../../report/nodeDocument.js";
import { reportHtml } from "../../report/report.js";
import { answerSentence, machineSentence, otherCrossingSentences, regretSentence, subjectSentence } from "../../report/sentences.js";
import { textTable } from "../../report/table.js";
import { asConvolutionError, asData, exitCodes } from "../failure.js";
import { writeOutput } from "../files.js";
import type { Report } from "../report.js";
import type { MeasureArguments } from "./measureArguments.js";
import type { Measured } from "./measureCommand.js";

/** Writes what was measured where it is asked for, and tells it. What cannot be written does not keep it from being told. */
export async function findingsReport(
  measured: Measured,
  { profile: profilePath, report: reportPath, force }: MeasureArguments,
  notes: string[],
): Promise<Report> {
  const { profile, crossover } = measured;
  const written: string[] = [];
  const failures: ConvolutionError[] = [];
  const write = async (path: string, content: string): Promise<void> => {
    await writeOutput(path, Buffer.from(content), force === true).then(
      () => written.push(path),
      (error: unknown) => failures.push(asConvolutionError(error)),
    );
  };
  if (profilePath !== undefined) await write(profilePath, `${JSON.stringify(profile, null, 2)}\n`);
  if (reportPath !== undefined && crossover !== undefined) await write(reportPath, reportHtml({ crossover, profile, document: nodeDocument() }));
  const paragraphs = [...(crossover === undefined ? [] : crossoverParagraphs(crossover)), profileParagraph(profile)];
  if (written.length > 0) paragraphs.push(`Written: ${listed(written)}.`);
  return {
    text: `${paragraphs.join("\n\n")}\n`,
    notes: [...notes, ...failures.map(({ message, code }) => `failed: ${message} [${code}]`)],
    data: { profile, crossover: crossover ?? null, written, failures: failures.map(asData), notes },
    exitCode: failures.length > 0 ? exitCodes.failed : exitCodes.done,
  };
}

function crossoverParagraphs(crossover: Crossover): string[] {
  return [
    `${subjectSentence(crossover)}\n${machineSentence(crossover)}`,
    textTable(crossover),
    [answerSentence(crossover), ...otherCrossingSentences(crossover), regretSentence(crossover), ...crossover.notes].join("\n"),
  ];
}

/** How many prices there are, and how far predictions were off. */
function profileParagraph({ host, nanoseconds, spread = {}, checks = [], notes = [] }: HardwareProfile): string {
  const [all, measured] = [Object.keys(nanoseconds).length, Object.keys(spread).length];
  const sentences = [
    `Profile of ${host}: ${measured} of ${all} prices were measured well, the others keep their proportion to them.`,
    ...heldSentences(checks),
    ...notes,
  ];
  return sentences.join("\n");
}

/** How far predictions were off for problems that prices were not fitted to. */
function heldSentences(checks: NonNullable<HardwareProfile["checks"]>): string[] {
  const errors = checks.map(({ predicted, measured }) => Math.abs(predicted / measured - 1));
  if (errors.length === 0) return [];
  if (errors.length === 1) return [`Held against one other problem, the predicted time was off by ${percent(errors[0]!)}.`];
  return [
    `Held against ${errors.length} other problems, predicted times were off by ${percent(median(errors))} (median), ${percent(Math.max(...errors))} at most.`,
  ];
}
