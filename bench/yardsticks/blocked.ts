import type { Raster } from "../../src/index.js";
import type { Case } from "../cases.js";
import type { Contender } from "../contender.js";
import { verify, yardstickTolerance } from "../verify.js";
import { compiled } from "./compiled.js";
import { factorsOf } from "./factors.js";
import { YardstickProcess } from "./process.js";
import { freshPath, writeSamples } from "./workFolder.js";

/** The instruction sets that the yardsticks may use: 128-bit vectors without fused multiply–add, as in WebAssembly. */
export const floatFlags = ["-msse4.2"];
export const byteFlags = ["-mavx"];

/** Sources that speak the protocol of job.h. */
export type BlockedSource = "direct_blocked" | "separable_blocked" | "direct_bytes" | "separable_bytes" | "box_bytes";

/** How far fixed-point forms may be from the definition before rounding: the 1/16 of a level that ours keep to. */
const fixedPointTolerance = 1 / 16;

/** The compiled program for a case. */
export function blockedProgram(source: BlockedSource, { kernel, layout }: Case): string {
  const flags = source.endsWith("_bytes") ? byteFlags : floatFlags;
  return compiled(source, flags, { TAP_COLUMNS: kernel.width, TAP_ROWS: kernel.height, CHANNELS: layout.channels });
}

/** A yardstick over a case's images: replicate border, extent `same`, convolution. Separable kernels must be of unit gain. */
export async function startBlocked(
  folder: string,
  source: BlockedSource,
  one: Case,
  planes: readonly Raster[],
): Promise<{ process: YardstickProcess; contenders: Contender[] }> {
  const { kernel, layout } = one;
  const program = blockedProgram(source, one);
  const { row, column } = factorsOf(kernel);
  // The forms lay taps on the image as they stand: reversed for a convolution.
  const taps = source.startsWith("direct") ? kernel.taps.toReversed() : [...row.toReversed(), ...column.toReversed()];
  const process = new YardstickProcess(
    program,
    [
      String(layout.width),
      String(layout.height),
      String(planes.length),
      writeSamples(
        folder,
        "planes",
        planes.map(({ data }) => data),
      ),
      writeSamples(folder, "taps", [Float32Array.from(taps)]),
    ],
    freshPath(folder, "result"),
  );
  const tolerance = layout.sample === "f32" ? yardstickTolerance : fixedPointTolerance;
  const contenders = (await process.forms()).map((form) => {
    const contender = process.contender(`C ${form}`, form);
    const check = async (): Promise<number> => {
      await contender.run(0);
      const bytes = await process.resultBytes();
      return verify(one, planes[0]!, layout.sample === "f32" ? new Float32Array(bytes.buffer) : bytes, tolerance);
    };
    return { ...contender, verify: check };
  });
  return { process, contenders };
}
