import type { Raster, Region } from "../../../src/index.js";

/** Largest size of a crop: it fits a phone of 360 pixels at 1:1. */
const cropWidth = 320;
const cropHeight = 240;

/**
 * Two rectangles worth looking at: the one with most detail, and the one with most detail among those that do not touch it.
 * Detail is the mean absolute difference between neighbouring samples of the first channel.
 */
export function cropPlaces(image: Raster & { channels: number }): Region[] {
  const width = Math.min(cropWidth, image.width);
  const height = Math.min(cropHeight, image.height);
  const places: (Region & { detail: number })[] = [];
  for (let y = 0; y + height <= image.height; y += Math.max(1, height >> 1)) {
    for (let x = 0; x + width <= image.width; x += Math.max(1, width >> 1))
      places.push({ x, y, width, height, detail: detailIn(image, { x, y, width, height }) });
  }
  places.sort((a, b) => b.detail - a.detail);
  const first = places[0];
  const second = places.find((place) => Math.abs(place.x - first.x) >= 1.5 * width || Math.abs(place.y - first.y) >= 1.5 * height);
  return (second === undefined ? [first] : [first, second]).map(({ x, y }) => ({ x, y, width, height }));
}

function detailIn(image: Raster & { channels: number }, place: Region): number {
  const stride = image.stride ?? image.width * image.channels;
  let sum = 0;
  for (let row = place.y; row < place.y + place.height; row += 3) {
    for (let column = place.x; column + 2 < place.x + place.width; column += 2) {
      const index = row * stride + column * image.channels;
      sum += Math.abs(image.data[index] - image.data[index + 2 * image.channels]);
    }
  }
  return sum;
}
