import { type Explanation, type ResultRaster, type SampleType, createEngine } from "../index.js";
import { type PlanArguments, engineOptionsOf, kernelOf, prepareOptionsOf } from "./arguments.js";
import { encodePng } from "./encodePng.js";
import { checkOutput, readInput, writeOutput } from "./files.js";
import { type SourceImage, formName, readImage } from "./png.js";
import { type Report, asMilliseconds } from "./report.js";

export interface FilterArguments extends PlanArguments {
  force?: true;
}

/** Filters one PNG into another. */
export async function filterFile(input: string, output: string, options: FilterArguments): Promise<Report> {
  const start = performance.now();
  const force = options.force === true;
  const kernel = await kernelOf(options);
  await checkOutput(output, force);
  const source = readImage(await readInput(input), input, options.light);
  const { result, explanation, milliseconds, build } = await filterImage(source, kernel, options);
  await writeOutput(output, encodePng(result, source.carried), force);
  const sample = options.outputSample ?? source.layout.sample;
  const notes = [...source.notes, ...rescalingNotes(source.layout.sample, sample, options.gain)];
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
}

async function filterImage(source: SourceImage, kernel: Awaited<ReturnType<typeof kernelOf>>, options: PlanArguments): Promise<Filtered> {
  const engine = await createEngine(engineOptionsOf(options));
  try {
    const start = performance.now();
    const filter = engine.prepare(kernel, source.layout, prepareOptionsOf(options));
    const prepared = performance.now();
    const result = filter.run(source.raster);
    const milliseconds = { prepare: prepared - start, run: performance.now() - prepared };
    return { result, explanation: filter.explanation, build: engine.build, milliseconds };
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

/** A change of depth leaves the numbers as they are, which is seldom what a newcomer expects. */
function rescalingNotes(from: SampleType, to: SampleType, gain: number | undefined): string[] {
  if (from === to || gain !== undefined) return [];
  if (to === "u8") return ["16-bit values were written to 8 bits as they are, 255 at most: --gain 1/257 maps the whole range."];
  return ["8-bit values were written to 16 bits as they are, which looks black: --gain 257 maps the whole range."];
}
