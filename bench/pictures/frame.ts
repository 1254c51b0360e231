import type { Region, ResultRaster } from "../../src/index.js";

/** Blue, which nothing on the sheet is. */
const lineColour = [0, 84, 255] as const;

/** The raster of three channels with a blue line one sample wide around a region of it, just outside. */
export function framed(raster: ResultRaster, { x, y, width, height }: Region): ResultRaster {
  const { channels } = raster;
  const data = Uint8Array.from(raster.data);
  for (let row = y - 1; row <= y + height; row += 1) {
    for (let column = x - 1; column <= x + width; column += 1) {
      const inside = row >= y && row < y + height && column >= x && column < x + width;
      const at = (row * raster.width + column) * channels;
      if (!inside) data.set(lineColour, at);
    }
  }
  return { ...raster, data };
}
