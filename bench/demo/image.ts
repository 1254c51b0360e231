import { basename } from "node:path";
import { readInput } from "../../src/cli/files.js";
import { readImage } from "../../src/cli/png.js";
import type { Layout, Region, ResultRaster } from "../../src/index.js";
import { drawSheet } from "./sheet/sheet.js";

/** The image that the demo works on. */
export interface DemoImage {
  raster: ResultRaster;
  layout: Required<Layout>;
  /** What it is, in words that begin a sentence. */
  name: string;
  /** Parts worth showing at 1:1; found by detail where absent. */
  places?: Region[];
  /** Sentences about how the file was read. */
  notes: readonly string[];
}

/** Of the drawn sheet: teeth, veins and a tape; the net of veins of the lobed leaf; the label. */
export const drawnPlaces: Region[] = [
  { x: 345, y: 520, width: 320, height: 240 },
  { x: 820, y: 350, width: 320, height: 240 },
  { x: 1080, y: 868, width: 320, height: 240 },
];

/** The herbarium sheet. */
export function drawnImage(): DemoImage {
  const raster = drawSheet();
  const { width, height, channels } = raster;
  return { raster, layout: { width, height, channels, sample: "u8" }, name: "A herbarium sheet drawn by code", places: drawnPlaces, notes: [] };
}

/**
 * A photograph from a PNG file.
 *
 * @throws ConvolutionError `file-unreadable`, `invalid-png`
 */
export async function readPhotograph(path: string): Promise<DemoImage> {
  const { raster, layout, notes } = readImage(await readInput(path), path);
  return { raster: { ...raster, channels: layout.channels }, layout, name: `The photograph ${basename(path)}`, notes };
}
