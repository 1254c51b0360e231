/** `npm run pictures`: what each border rule puts around an image and what a blur makes of it, drawn by the engine for the README. */
import { fileURLToPath } from "node:url";
import { encodePng } from "../../src/cli/encodePng.js";
import { writeOutput } from "../../src/cli/files.js";
import { box, createEngine, delta, type BorderRule, type Engine, type ResultRaster } from "../../src/index.js";
import { drawSheet } from "../demo/sheet/sheet.js";
import { framed } from "./frame.js";

/** Samples that are shown outside the image on each side. */
const margin = { x: 60, y: 40 };
/** A single 1 among zeros: it changes nothing, and its full extent reaches as far outside as it has zeros. */
const surroundingsKernel = delta({ width: 2 * margin.x + 1, height: 2 * margin.y + 1 });
const blurKernel = box(27);

const rules: readonly BorderRule[] = [
  "replicate",
  "zero",
  { constant: [196, 62, 48] },
  "periodic",
  "half-sample-symmetric",
  "whole-sample-symmetric",
  "renormalised",
];

const nameOf = (rule: BorderRule): string => (typeof rule === "string" ? rule : "constant");

/** A leaf that is cut by the left edge, from a small drawing of the sheet. */
function leafCrop(engine: Engine): ResultRaster {
  return engine.convolve(drawSheet(400), delta(), { region: { x: 122, y: 200, width: 80, height: 56 } });
}

/** The image and what stands around it. */
function surroundings(engine: Engine, image: ResultRaster, border: BorderRule): ResultRaster {
  const shown = engine.convolve(image, surroundingsKernel, { border, extent: "full" });
  return framed(shown, { ...margin, width: image.width, height: image.height });
}

const engine = await createEngine();
const image = leafCrop(engine);
for (const border of rules) {
  const pictures = { outside: surroundings(engine, image, border), blurred: engine.convolve(image, blurKernel, { border }) };
  for (const [what, picture] of Object.entries(pictures)) {
    const path = fileURLToPath(new URL(`${nameOf(border)}-${what}.png`, import.meta.url));
    await writeOutput(path, encodePng(picture, []), true);
    console.log(`${picture.width}×${picture.height}  bench/pictures/${nameOf(border)}-${what}.png`);
  }
}
engine.dispose();
