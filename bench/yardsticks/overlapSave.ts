import type { Raster } from "../../src/index.js";
import type { Case } from "../cases.js";
import type { Contender } from "../contender.js";
import { verify, yardstickTolerance } from "../verify.js";
import { compiled } from "./compiled.js";
import { YardstickProcess } from "./process.js";
import { freshPath, writeSamples } from "./workFolder.js";

/** Lengths of tiles: products of 2, 3 and 5 that FFTW has fast codelets for. */
const lengths = [
  32, 48, 64, 80, 96, 108, 128, 144, 160, 192, 216, 240, 256, 288, 320, 384, 432, 480, 512, 576, 640, 720, 768, 864, 960, 1024, 1152, 1280, 1920, 2048,
];

/** Tiles that are tried: the best by points · (log₂ points + overhead), which planning then times. */
const tried = 8;

/** Copying in, out and the product, in passes. */
const overhead = 4;

/** What all tiles of a shape take, roughly: a first order among hundreds of shapes. */
function roughCost(columns: number, rows: number, one: Case): number {
  const { width, height } = one.layout;
  const across = Math.ceil(width / (columns - one.kernel.width + 1));
  const down = Math.ceil(height / (rows - one.kernel.height + 1));
  return across * down * columns * rows * (Math.log2(columns * rows) + overhead);
}

export function tilesWorthTrying(one: Case): string[] {
  const fitting = (taps: number, image: number): number[] => lengths.filter((length) => length >= taps + 7 && length <= 2 * (image + taps));
  const shapes = fitting(one.kernel.width, one.layout.width).flatMap((columns) =>
    fitting(one.kernel.height, one.layout.height).map((rows) => ({ columns, rows, cost: roughCost(columns, rows, one) })),
  );
  return shapes
    .toSorted((a, b) => a.cost - b.cost)
    .slice(0, tried)
    .map(({ columns, rows }) => `${columns}x${rows}`);
}

/** Overlap-save in C over FFTW: one f32 plane, zero border, convolution. */
export function startOverlapSave(folder: string, one: Case, planes: readonly Raster[]): { process: YardstickProcess; contenders: Contender[] } {
  const { kernel, layout } = one;
  const images = writeSamples(
    folder,
    "planes",
    planes.map(({ data }) => data),
  );
  const taps = writeSamples(folder, "taps", [Float32Array.from(kernel.taps.toReversed())]);
  const parameters = [layout.width, layout.height, planes.length, images, kernel.width, kernel.height, taps].map(String);
  const program = compiled("overlap_save_fftw", ["-msse4.2"], {}, ["fftw3f"]);
  // FFTW keeps what it has measured beside the program: planning takes minutes the first time.
  const process = new YardstickProcess(program, [...parameters, `${program}.wisdom`], freshPath(folder, "result"));
  const contenders = tilesWorthTrying(one).map((tile) => {
    const contender = process.contender(`FFTW ${tile}`, tile);
    const check = async (): Promise<number> => {
      await contender.run(0);
      return verify(one, planes[0]!, await process.result(), yardstickTolerance);
    };
    return { ...contender, verify: check };
  });
  return { process, contenders };
}
