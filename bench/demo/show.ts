import { join } from "node:path";
import { encodePng } from "../../src/cli/encodePng.js";
import { writeOutput } from "../../src/cli/files.js";
import type { Engine } from "../../src/index.js";
import { agreementsOf } from "./agreement.js";
import type { DemoImage } from "./image.js";
import { crossingSentence } from "./crossing.js";
import { threeJobs } from "./jobs.js";
import { thisMachine } from "./machine.js";
import { perform } from "./measure.js";
import { narrate } from "./narrate.js";
import { reportPage, type Findings } from "./report/page.js";

/**
 * Does the three jobs, tells each as it is done, and writes the pictures and the report.
 *
 * @returns whether all methods agreed within their bounds
 */
export async function show(engine: Engine, image: DemoImage, folder: string, tell: (text: string) => void): Promise<boolean> {
  const { raster, layout, name } = image;
  tell(`${name}: ${layout.width} × ${layout.height}, ${layout.channels} channels of ${layout.sample}; engine build ${engine.build}.`);
  for (const note of image.notes) tell(note);
  tell("");
  const outcomes: Findings["outcomes"] = [];
  for (const job of threeJobs()) {
    const outcome = perform(engine, job, raster, layout);
    const agreements = agreementsOf(engine, outcome, raster);
    const aside = job.family === undefined ? undefined : crossingSentence(engine, job.family, layout);
    tell(narrate(outcome, agreements, aside));
    outcomes.push({ outcome, agreements, ...(aside !== undefined && { aside }) });
  }
  const machine = thisMachine();
  if (machine.busy !== undefined) tell(`${machine.busy}\n`);
  const page = reportPage(engine, { image: raster, imageName: name, outcomes, machine, ...(image.places && { places: image.places }) });
  const files: [string, Uint8Array][] = [
    ["before.png", encodePng(raster, [])],
    ...outcomes.map(({ outcome }): [string, Uint8Array] => [`${outcome.job.file}.png`, encodePng(outcome.result, [])]),
    ["report.html", Buffer.from(page)],
  ];
  for (const [file, content] of files) {
    const path = join(folder, file);
    await writeOutput(path, content, true);
    tell(`Wrote ${path}`);
  }
  return outcomes.every(({ agreements }) => agreements.every(({ holds }) => holds));
}
