import type { Border, Layout, SampleType } from "../index.js";

/** Names of sizes. Common practice: the display industry's names for these rasters. */
const sizeNames: Readonly<Record<string, string>> = {
  "640×480": "VGA",
  "1280×720": "HD",
  "1920×1080": "Full HD",
  "2560×1440": "Quad HD",
  "3840×2160": "4K UHD",
};

const sampleNames: Record<SampleType, string> = { u8: "bytes", u16: "16-bit samples", f32: "floats" };
const channelNames: Record<number, string> = {
  1: "one channel of",
  2: "two channels (grey and alpha) of",
  3: "three channels of",
  4: "four channels (RGBA) of",
};

/** "Full HD (1920×1080), one channel of bytes", "4000×3000 (12 megapixels), four channels (RGBA) of floats". */
export function layoutInWords({ width, height, channels, sample }: Required<Layout>): string {
  const dimensions = `${width}×${height}`;
  const name = sizeNames[dimensions];
  const megapixels = (width * height) / 1e6;
  const size =
    name !== undefined ? `${name} (${dimensions})` : megapixels >= 1 ? `${dimensions} (${Number(megapixels.toPrecision(2))} megapixels)` : dimensions;
  return `${size}, ${channelNames[channels] ?? `${channels} channels of`} ${sampleNames[sample] ?? sample}`;
}

/** What kind of kernels a crossover was measured with. */
export function kernelsInWords(separable: boolean): string {
  return separable ? "separable kernels (bells)" : "kernels without structure, which no method has a short way for";
}

/** A border rule as it is written in options: `replicate`, `constant 0`, `rows periodic, columns zero`. */
export function borderInWords(border: Border): string {
  if (typeof border === "string") return border;
  if ("constant" in border) return `constant ${String(border.constant)}`;
  const { rows = "replicate", columns = "replicate" } = border as Exclude<Border, string | { constant: unknown }>;
  return `rows ${borderInWords(rows)}, columns ${borderInWords(columns)}`;
}
