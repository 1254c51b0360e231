import { colour } from "./colour.js";
import { layLabel, layStamp } from "./label.js";
import { photographed } from "./lamp.js";
import { write } from "./lettering.js";
import { layPaper } from "./paper.js";
import { blankPlate } from "./plate.js";
import { layScaleBar } from "./scaleBar.js";
import { layFrond, layLeafyTwig, layLobedLeaf } from "./specimens.js";

/** A drawn sheet: an RGB raster of bytes. */
export interface Sheet {
  data: Uint8Array;
  width: number;
  height: number;
  channels: 3;
}

/** The size at which the demo works. */
export const sheetWidth = 1600;
export const sheetHeight = 1200;

const pencil = colour(0x55534e);

/**
 * Draws a herbarium sheet on its copy stand: paper, three pressed specimens under linen tape, label, stamp and scale bar.
 * Everything on it is invented, and every random number comes from fixed start values: the same bytes at each call.
 *
 * @param width pixels across; the height is three quarters of it
 */
export function drawSheet(width: number = sheetWidth): Sheet {
  const height = Math.round((width * sheetHeight) / sheetWidth);
  const plate = blankPlate(width, height);
  layPaper(plate);
  layFrond(plate);
  layLobedLeaf(plate);
  layLeafyTwig(plate);
  layLabel(plate);
  layScaleBar(plate, 590, 1030);
  layStamp(plate, 1490, 90);
  const marks: [string, number, number][] = [
    ["a", 330, 1098],
    ["b", 905, 806],
    ["c", 1140, 800],
  ];
  for (const [text, x, y] of marks) write(plate, { text, x, y, height: 26, pen: 2.2, ink: pencil, slant: 0.15 });
  return { data: photographed(plate), width, height, channels: 3 };
}
