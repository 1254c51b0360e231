import { boxBytes, directBytes, directFloats, fftFloats, resized, samplesOf, separableBytes, separableFloats, type Case } from "../cases.js";
import type { ContestResult } from "../contest.js";
import { EngineContender } from "../engineContender.js";
import { timeLoops, warnOfSaturation, type LoopTime } from "../loops.js";
import { loopContest } from "./loopContest.js";
import { nothing, type Ground, type Group } from "./group.js";

const sides = [16, 32, 64, 128, 256];
const works = [directFloats(3, 1), directBytes(5), separableFloats(9, 1), separableBytes(9), boxBytes(9), fftFloats(15)];

/** What a small image may take: its samples at the rate of 1080p times this, and a call. */
const factor = 3;
const callMilliseconds = 0.005;

const asLoop = (contender: EngineContender) => ({ name: contender.name, run: (turn: number) => contender.filterPlane(turn) });

async function measure({ engine }: Ground, one: Case): Promise<ContestResult[]> {
  const contenders = [one, ...sides.map((side) => resized(one, side, side))].map((each) => new EngineContender(engine, each));
  const times = await timeLoops(contenders.map(asLoop), 450, "wall");
  warnOfSaturation(times);
  const [large, ...rest] = times as [LoopTime, ...LoopTime[]];
  const results = rest.map((time, index) => {
    const contender = contenders[index + 1]!;
    const atRate = large.milliseconds.median * (samplesOf(contender.case) / samplesOf(one));
    const weight = (factor * atRate + callMilliseconds) / large.milliseconds.median;
    return loopContest(time.name, time, large, { weight, bar: 1, largestDifference: contender.verify() });
  });
  for (const { filter } of contenders) filter.dispose();
  return results;
}

export const small: Group = {
  name: "small",
  title: `small images, prepared: the ratio is to ${factor} × their samples at the rate of 1080p and ${1000 * callMilliseconds} µs`,
  async measure(ground) {
    const contests: ContestResult[] = [];
    for (const one of works) contests.push(...(await measure(ground, one)));
    return { ...nothing(), contests };
  },
};
