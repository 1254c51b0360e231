import type { Contender } from "../contender.js";
import { compiled } from "./compiled.js";
import { YardstickProcess } from "./process.js";

/** What a result of FFTW may be off, over the root mean square of all results. */
const tolerance = 2e-6;

/** Batches of transforms by FFTW. */
export interface Transforms {
  contender(layout: string, place: string, points: number, batch: number): Contender;
  plan(layout: string, place: string, points: number, batch: number): Promise<string>;
  end(): Promise<void>;
}

export function startTransforms(): Transforms {
  const process = new YardstickProcess(compiled("transforms_fftw", ["-msse4.2"], {}, ["fftw3f", "m"]), []);
  return {
    contender(layout, place, points, batch) {
      const what = `${layout} ${place} forward ${points} ${batch}`;
      return {
        name: `FFTW ${layout}, ${place === "in" ? "in place" : "out of place"}`,
        run: async () => (await process.ask<{ milliseconds: number }>(what)).milliseconds,
        async verify() {
          const { error } = await process.ask<{ error: number }>(`error ${what}`);
          if (!(error <= tolerance)) throw new Error(`FFTW is off by ${error} of the root mean square for ${what}`);
          return error;
        },
      };
    },
    plan: async (layout, place, points, batch) => (await process.ask<{ plan: string }>(`plan ${layout} ${place} forward ${points} ${batch}`)).plan,
    end: () => process.end(),
  };
}

/** The instruction sets that the codelets of a printed plan are named after, and how wide their vectors are. */
const widthOf: Record<string, string> = {
  sse2: "sse2 (128 bit)",
  avx: "avx (256 bit)",
  avx2: "avx2 (256 bit)",
  avx2_128: "avx2_128 (128 bit)",
  avx_128_fma: "avx_128_fma (128 bit)",
  avx512: "avx512 (512 bit)",
  neon: "neon (128 bit)",
  generic_simd128: "generic_simd128 (128 bit)",
  generic_simd256: "generic_simd256 (256 bit)",
};

export function vectorWidths(plan: string): string[] {
  const named = [...plan.matchAll(/_(generic_simd\d+|avx_128_fma|avx2_128|avx512|avx2|avx|sse2|neon)\b/g)].map(([, name]) => widthOf[name!]!);
  return named.length === 0 ? ["scalar"] : [...new Set(named)];
}
