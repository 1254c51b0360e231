import type { Layout, Raster, SampleType, Samples } from "../types.js";

const fullValues = { u8: 255, u16: 65_535, f32: 1 } as const;

/** After so many samples the noise begins again: enough that no row repeats in the first cache. */
const period = 65_521;

function noise(sample: SampleType, count: number): Samples {
  const data = sample === "u8" ? new Uint8Array(count) : sample === "u16" ? new Uint16Array(count) : new Float32Array(count);
  let state = 1;
  const full = fullValues[sample];
  for (let k = 0; k < Math.min(period, count); k++) {
    // Park & Miller, Comm. ACM 31: 1192, 1988, with the multiplier of Park, Miller & Stockmeyer, Comm. ACM 36(7): 105, 1993.
    state = (state * 48_271) % 2_147_483_647;
    data[k] = (state / 2_147_483_647) * full;
  }
  for (let filled = period; filled < count; filled *= 2) data.copyWithin(filled, 0, Math.min(filled, count - filled));
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
