import type { Engine } from "../src/index.js";
import { boxFloats, directFloats, fftFloats, separableFloats, type Case } from "./cases.js";
import { EngineContender } from "./engineContender.js";
import { timeLoops } from "./loops.js";
import type { Spread } from "./spread.js";

/** Time against the size of the kernel: one f32 plane at 1080p, each method where it is of use. */
const sizes = {
  "direct": [3, 5, 7, 9, 11, 15, 21, 31],
  "separable": [3, 5, 9, 15, 31, 63, 127],
  "running-sum": [3, 9, 31, 101, 255],
  "fft": [3, 7, 15, 31, 63, 127, 255],
};

const caseOf: Record<keyof typeof sizes, (size: number) => Case> = {
  "direct": (size) => directFloats(size, 1),
  "separable": (size) => separableFloats(size, 1),
  "running-sum": boxFloats,
  "fft": fftFloats,
};

export interface CurvePoint {
  case: string;
  method: string;
  /** Taps on each axis. */
  taps: number;
  milliseconds: Spread;
}

/** For each size of each method. */
const milliseconds = 600;

export async function measureCurve(engine: Engine): Promise<CurvePoint[]> {
  const points: CurvePoint[] = [];
  for (const method of Object.keys(sizes) as (keyof typeof sizes)[]) {
    const contenders = sizes[method].map((size) => new EngineContender(engine, caseOf[method](size)));
    const times = await timeLoops(
      contenders.map((contender) => ({ name: contender.name, run: (turn) => contender.filterPlane(turn) })),
      milliseconds,
    );
    for (const [index, contender] of contenders.entries()) {
      contender.verify();
      points.push({ case: `curve: ${contender.name}`, method, taps: sizes[method][index]!, milliseconds: times[index]!.milliseconds });
      contender.filter.dispose();
    }
  }
  return points;
}
