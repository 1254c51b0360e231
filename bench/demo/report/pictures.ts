import { encodePng } from "../../../src/cli/encodePng.js";
import { box, type Engine, type Region, type ResultRaster } from "../../../src/index.js";
import { escaped } from "./markup.js";

/** An image element with the raster inside it as a PNG. */
export function picture(raster: ResultRaster, alt: string, className: string): string {
  const bytes = encodePng(asBytes(raster), []);
  const source = `data:image/png;base64,${Buffer.from(bytes).toString("base64")}`;
  return `<img class="${className}" src="${source}" width="${raster.width}" height="${raster.height}" alt="${escaped(alt)}">`;
}

/** The part of a raster that a rectangle marks, in own memory. */
export function cropped(raster: ResultRaster, { x, y, width, height }: Region): ResultRaster {
  const { channels } = raster;
  const data = raster.data.slice(0, width * height * channels);
  for (let row = 0; row < height; row += 1) {
    const start = ((y + row) * raster.width + x) * channels;
    data.set(raster.data.subarray(start, start + width * channels), row * width * channels);
  }
  return { data, width, height, channels };
}

/** The whole raster, smaller by a whole number so that it is at most `widest` across: the engine's own box means, every n-th kept. */
export function reduced(engine: Engine, raster: ResultRaster, widest: number): ResultRaster {
  const step = Math.max(1, Math.ceil(raster.width / widest), Math.ceil(raster.height / widest));
  if (step === 1) return raster;
  const means = engine.convolve(raster, box(step));
  const [width, height, channels] = [Math.floor(raster.width / step), Math.floor(raster.height / step), raster.channels];
  const data = means.data.slice(0, width * height * channels);
  for (let row = 0; row < height; row += 1) {
    for (let column = 0; column < width; column += 1) {
      const from = ((row * step + (step >> 1)) * raster.width + column * step + (step >> 1)) * channels;
      for (let channel = 0; channel < channels; channel += 1) data[(row * width + column) * channels + channel] = means.data[from + channel];
    }
  }
  return { data, width, height, channels };
}

/** 16-bit samples as bytes, for a smaller report. */
function asBytes(raster: ResultRaster): ResultRaster {
  if (!(raster.data instanceof Uint16Array)) return raster;
  return { ...raster, data: Uint8Array.from(raster.data, (sample) => Math.round(sample / 257)) };
}
