import { ConvolutionError } from "../errors.js";
import { fillWithNoise } from "../math/noise.js";
import type { Layout, Raster, SampleType, Samples } from "../types.js";

const fullValues = { u8: 255, u16: 65_535, f32: 1 } as const;

const arrays = { u8: Uint8Array, u16: Uint16Array, f32: Float32Array } as const;

/** @throws ConvolutionError `memory-exhausted` where the host has no memory for so many */
function samplesFor(sample: SampleType, count: number): Samples {
  try {
    return new arrays[sample](count);
  } catch (cause) {
    const message = `The host gives no memory for an image of ${count} samples. Measure with smaller images.`;
    throw new ConvolutionError("memory-exhausted", message, { expected: `memory for ${count} samples`, received: String(cause), cause });
  }
}

function noise(sample: SampleType, count: number): Samples {
  const data = samplesFor(sample, count);
  fillWithNoise(data, fullValues[sample]);
  return data;
}

/** Images of noise, and rasters for results: memory is taken once for each sample type and used again. */
export class Inputs {
  readonly #sources = new Map<SampleType, Samples>();
  readonly #targets = new Map<SampleType, Samples>();

  source({ width, height, channels, sample }: Required<Layout>): Raster {
    const count = width * height * channels;
    let data = this.#sources.get(sample);
    if (data === undefined || data.length < count) this.#sources.set(sample, (data = noise(sample, count)));
    return { data: data.subarray(0, count), width, height, channels };
  }

  target({ width, height, channels }: Required<Layout>, sample: SampleType): Raster {
    const count = width * height * channels;
    let data = this.#targets.get(sample);
    if (data === undefined || data.length < count) this.#targets.set(sample, (data = noise(sample, count)));
    return { data: data.subarray(0, count), width, height, channels };
  }
}
