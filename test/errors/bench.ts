import { createEngine, kernel, type Engine, type Filter, type Kernel, type Layout, type PrepareOptions, type Raster, type Samples } from "../../src/index.js";

/** What a caller has at hand when a call goes wrong: an engine, an image, a kernel, and arrays that must stay as they are. */
export interface Bench {
  engine: Engine;
  /** 6 × 5 bytes, one channel. */
  image: Raster<Uint8Array>;
  /** A kernel that is neither separable nor a box. */
  kernel: Kernel;
  /** An image of numbers 0, 1, 2, … of any type. */
  raster<S extends Samples>(array: new (length: number) => S, width: number, height: number, channels?: 1 | 2 | 3 | 4): Raster<S>;
  /** A filter that is disposed after the test. */
  filter(layout?: Partial<Layout>, options?: PrepareOptions): Filter;
  /** Registers an array whose content is compared after the call. */
  watch<S extends Samples>(data: S): S;
  /** Throws unless the arrays are unchanged and the engine still gives the right answer. */
  settle(expectEqual: (actual: unknown, expected: unknown) => void): void;
}

/** Laid on the image, this sums the sample to the right, twice the one below and thrice the one to the lower left. */
const asymmetric = kernel([
  [0, 0, 3],
  [1, 0, 0],
  [0, 2, 0],
]);

export async function makeBench(): Promise<Bench> {
  const engine = await createEngine();
  const watched: { data: Samples; before: number[] }[] = [];
  const filters: Filter[] = [];
  const watch = <S extends Samples>(data: S): S => {
    watched.push({ data, before: Array.from(data) });
    return data;
  };
  const image: Raster<Uint8Array> = { data: watch(Uint8Array.from({ length: 30 }, (_, index) => (7 * index) % 31)), width: 6, height: 5, channels: 1 };
  return {
    engine,
    image,
    kernel: asymmetric,
    watch,
    raster: (array, width, height, channels = 1) => {
      const data = new array(width * height * channels);
      for (let index = 0; index < data.length; index++) data[index] = index;
      return { data: watch(data), width, height, channels };
    },
    filter: (layout, options) => {
      const made = engine.prepare(asymmetric, { width: 6, height: 5, channels: 1, sample: "u8", ...layout }, options);
      filters.push(made);
      return made;
    },
    settle: (expectEqual) => {
      for (const { data, before } of watched) expectEqual(Array.from(data), before);
      expectEqual(Array.from(engine.convolve(image, asymmetric, { border: "zero" }).data), rightAnswer(image));
      for (const made of filters) made.dispose();
      engine.dispose();
    },
  };
}

/** y[r, c] = 3 x[r + 1, c − 1] + x[r, c + 1] + 2 x[r − 1, c], zero outside: the taps above, turned. */
function rightAnswer({ data, width, height }: Raster): number[] {
  const at = (r: number, c: number): number => (r < 0 || r >= height || c < 0 || c >= width ? 0 : data[r * width + c]!);
  return Array.from(data, (_, index) => {
    const [r, c] = [Math.floor(index / width), index % width];
    return Math.min(255, 3 * at(r + 1, c - 1) + at(r, c + 1) + 2 * at(r - 1, c));
  });
}
