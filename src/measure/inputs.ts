import { fillWithNoise } from "../math/noise.js";
import type { Layout, Raster, SampleType, Samples } from "../types.js";

const fullValues = { u8: 255, u16: 65_535, f32: 1 } as const;

function noise(sample: SampleType, count: number): Samples {
  const data = sample === "u8" ? new Uint8Array(count) : sample === "u16" ? new Uint16Array(count) : new Float32Array(count);
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
