import { directBytes, fftBytes, separableBytes, type Case } from "../cases.js";
import type { ContestResult } from "../contest.js";
import { kernelTransform } from "../coreTransform.js";
import { EngineContender } from "../engineContender.js";
import { timeLoops, type Loop, type LoopTime } from "../loops.js";
import { gaussian, reversed, type Kernel } from "../../src/index.js";
import { spreadOf } from "../spread.js";
import { loopContest } from "./loopContest.js";
import { nothing, type Ground, type Group } from "./group.js";

const allowedMilliseconds = 0.3;

/** The same work with other taps of the same size. */
function othersOf({ kernel, options }: Case): Kernel[] {
  const taps = kernel.width;
  if (options.method === "separable") return [5, 6].map((part) => gaussian({ sigma: taps / part, radius: (taps - 1) / 2 }));
  return [kernel, reversed(kernel)];
}

/** Tiles are told by the explanation: "… tiles of <columns>×<rows>". */
function tileOf(arithmetic: string): [columns: number, rows: number] {
  const [, columns, rows] = /(\d+)×(\d+)/.exec(arithmetic)!;
  return [Number(columns), Number(rows)];
}

/** A fixed time, where a line has no rival. */
const limit: LoopTime = { name: `${allowedMilliseconds} ms`, milliseconds: { ...spreadOf([allowedMilliseconds]), samples: 0 }, saturated: false };

/** Replaces the taps and shows, by a run, that the new ones count. */
async function measure({ engine }: Ground, one: Case): Promise<ContestResult> {
  const contender = new EngineContender(engine, one);
  const kernels = othersOf(one);
  const loops: Loop[] = [{ name: one.name, run: (turn) => contender.filter.replaceKernel(kernels[turn % kernels.length]!) }];
  if (one.options.method === "fft") loops.push(await kernelTransform(one.kernel, ...tileOf(contender.filter.explanation.arithmetic)));
  const [subject, transform] = await timeLoops(loops, 600, "wall", 21);
  contender.filter.replaceKernel(one.kernel);
  const largestDifference = contender.verify();
  contender.filter.dispose();
  if (!transform) return loopContest(one.name, subject!, limit, { weight: 1, bar: 1, largestDifference });
  const allowed = transform.milliseconds.median + allowedMilliseconds;
  return loopContest(`${one.name}: one kernel transform and ${allowedMilliseconds} ms`, subject!, transform, {
    weight: allowed / transform.milliseconds.median,
    bar: 1,
    largestDifference,
  });
}

export const replace: Group = {
  name: "replace",
  title: "replaceKernel, same size, 1080p RGBA bytes",
  async measure(ground) {
    const contests: ContestResult[] = [];
    for (const one of [directBytes(3), directBytes(9), directBytes(15), separableBytes(9), separableBytes(31), fftBytes(31), fftBytes(127)])
      contests.push(await measure(ground, one));
    return { ...nothing(), contests };
  },
};
