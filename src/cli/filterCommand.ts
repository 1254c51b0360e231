import { stat } from "node:fs/promises";
import type { Explanation, Kernel, ResultRaster } from "../index.js";
import { type PlanArguments, prepareOptionsOf } from "./arguments.js";
import { encodePng } from "./encodePng.js";
import { filterFolder } from "./batch/filterFolder.js";
import { makeEngine } from "./engineArguments.js";
import { checkOutput, readInput, writeOutput } from "./files.js";
import { kernelOf } from "./kernelArgument.js";
import type { Streams } from "./program.js";
import { rescalingNotes } from "./rescalingNotes.js";
import { type SourceImage, formName, readImage } from "./png.js";
import { type Report, asMilliseconds } from "./report.js";

export interface FilterArguments extends PlanArguments {
  force?: true;
}

/** Filters one PNG into another, or those of a folder into another folder. */
export async function filterPath(input: string, output: string, options: FilterArguments, streams: Streams): Promise<Report> {
  const force = options.force === true;
  const isFolder = await stat(input).then(
    (status) => status.isDirectory(),
    () => false, // reading it will tell what is wrong
  );
  return isFolder ? filterFolder({ input, output, force }, options, streams) : filterFile(input, output, force, options);
}

async function filterFile(input: string, output: string, force: boolean, options: PlanArguments): Promise<Report> {
  const start = performance.now();
  const { kernel, notes: kernelNotes } = await kernelOf(options);
  await checkOutput(output, force);
  const source = readImage(await readInput(input), input, options.light);
  const { result, explanation, milliseconds, build, engineNotes } = await filterImage(source, kernel, options);
  await writeOutput(output, encodePng(result, source.carried), force);
  const sample = options.outputSample ?? source.layout.sample;
  const notes = [...kernelNotes, ...engineNotes, ...source.notes, ...rescalingNotes(source.layout.sample, sample, options.gain)];
  const { width, height, channels } = result;
  const measured = { ...milliseconds, total: performance.now() - start };
  return {
    text: lineOf(output, `${width}×${height} ${formName({ channels, sample })}`, explanation, measured),
    notes,
    data: { input, output, width, height, channels, sample, build, method: explanation.method, milliseconds: measured, explanation, notes },
  };
}

interface Filtered {
  result: ResultRaster;
  explanation: Explanation;
  build: string;
  milliseconds: { prepare: number; run: number };
  engineNotes: string[];
}

async function filterImage(source: SourceImage, kernel: Kernel, options: PlanArguments): Promise<Filtered> {
  const { engine, notes: engineNotes } = await makeEngine(options, options.profile);
  try {
    const start = performance.now();
    const filter = engine.prepare(kernel, source.layout, prepareOptionsOf(options));
    const prepared = performance.now();
    const result = filter.run(source.raster);
    const milliseconds = { prepare: prepared - start, run: performance.now() - prepared };
    return { result, explanation: filter.explanation, build: engine.build, milliseconds, engineNotes };
  } finally {
    engine.dispose();
  }
}

function lineOf(output: string, form: string, explanation: Explanation, measured: { prepare: number; run: number; total: number }): string {
  const { method, terms, milliseconds } = explanation;
  const how = terms !== undefined && terms > 1 ? `${method} with ${terms} terms` : method;
  const times = `${asMilliseconds(measured.run)} for this first run (${asMilliseconds(milliseconds)} predicted once warm), ${asMilliseconds(measured.total)} in all`;
  return `${output}: ${form}, filtered by ${how}; ${times}.\n`;
}
