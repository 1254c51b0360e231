import { gaussian, kernel, type Engine, type Raster } from "../../src/index.js";
import { boxFloats, directFloats, fftFloats, separableFloats, structureless, type Case } from "../cases.js";
import { hold, type ContestResult } from "../contest.js";
import { EngineContender } from "../engineContender.js";
import { planesOf } from "../inputs.js";
import { nothing, type Group } from "./group.js";

/** What the same work may take as a multiple of its time on ordinary numbers. */
const bar = 2;

/** Every `each`-th sample next to nothing. */
function withDenormals(planes: readonly Raster[], each: number): Raster[] {
  return planes.map((plane) => ({ ...plane, data: (plane.data as Float32Array).map((value, k) => (k % each === 0 ? 1e-40 * value : value)) }));
}

/** Every third tap of a kernel of unit gain at 10⁻³⁸. */
function withTinyTaps(one: Case): Case {
  const { width, height, taps } = structureless(one.kernel.width);
  const at = (tap: number, k: number): number => (k % 3 === 1 ? 1e-38 : tap);
  const rows = Array.from({ length: height }, (_, j) => Array.from(taps.subarray(j * width, (j + 1) * width), (tap, i) => at(tap, j * width + i)));
  const sum = rows.flat().reduce((total, tap) => total + tap, 0);
  return { ...one, name: `${one.name}, taps down to 10⁻³⁸`, kernel: kernel(rows.map((row) => row.map((tap) => tap / sum))) };
}

/** A Gaussian whose outer taps are below 10⁻³⁸, beside one of as many taps that are not. */
const narrow = (one: Case): Case => ({ ...one, name: `${one.name}, taps down to 10⁻³⁸`, kernel: gaussian({ sigma: 1.15, radius: 15 }) });

async function against(
  engine: Engine,
  work: string,
  one: Case,
  planes: readonly Raster[],
  usual: Case,
  usualPlanes: readonly Raster[],
): Promise<ContestResult> {
  const subject = new EngineContender(engine, one, planes);
  const rival = new EngineContender(engine, usual, usualPlanes);
  try {
    return await hold({ work, subject, rivals: [rival], bar });
  } finally {
    subject.filter.dispose();
    rival.filter.dispose();
  }
}

export const denormals: Group = {
  name: "denormals",
  title: "samples and taps next to nothing against ordinary ones",
  async measure({ engine }) {
    const contests: ContestResult[] = [];
    for (const one of [directFloats(3, 1), directFloats(9, 1), separableFloats(9, 1), separableFloats(31, 1), boxFloats(9), fftFloats(31)]) {
      const planes = planesOf(one.layout);
      contests.push(await against(engine, `${one.name}, a tenth of the samples at 10⁻⁴⁰`, one, withDenormals(planes, 10), one, planes));
      contests.push(await against(engine, `${one.name}, all samples at 10⁻⁴⁰`, one, withDenormals(planes, 1), one, planes));
    }
    for (const [one, usual] of [
      [withTinyTaps(directFloats(9, 1)), directFloats(9, 1)],
      [narrow(separableFloats(31, 1)), separableFloats(31, 1)],
      [narrow(fftFloats(31)), fftFloats(31)],
    ] as const) {
      const planes = planesOf(one.layout);
      contests.push(await against(engine, one.name, one, planes, usual, planes));
    }
    return { ...nothing(), contests };
  },
};
