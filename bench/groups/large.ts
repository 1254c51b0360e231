import { boxBytes, directBytes, fftBytes, resized, samplesOf, separableBytes, type Case } from "../cases.js";
import { inTurns, warm } from "../contender.js";
import type { ContestResult } from "../contest.js";
import { EngineContender } from "../engineContender.js";
import { planesOf } from "../inputs.js";
import { spreadOf } from "../spread.js";
import { loopContest } from "./loopContest.js";
import { nothing, type Ground, type Group } from "./group.js";

const works = [directBytes(9), separableBytes(31), boxBytes(101), fftBytes(101)];
const scan = { width: 8000, height: 6000 };

/** A scan takes seconds: as many turns as keep the group within two minutes. */
const turns = 7;

async function measure({ engine }: Ground, one: Case): Promise<ContestResult> {
  const cases = [resized(one, scan.width, scan.height), one];
  const contenders = cases.map((each) => new EngineContender(engine, each, planesOf(each.layout, 1)));
  await warm(contenders, 1);
  const [large, ordinary] = (await inTurns(contenders, 1, turns)).map((times, index) => ({
    name: contenders[index]!.name,
    milliseconds: spreadOf(times),
    saturated: false,
  }));
  const largestDifference = contenders[0]!.verify();
  const { bytes } = contenders[0]!.filter.explanation;
  for (const { filter } of contenders) filter.dispose();
  return loopContest(`${large!.name}, ${(bytes / 2 ** 20).toFixed(0)} MiB`, large!, ordinary!, {
    weight: samplesOf(cases[0]!) / samplesOf(one),
    bar: 1.3,
    largestDifference,
  });
}

export const large: Group = {
  name: "large",
  title: "48 megapixels against 2, time a sample",
  async measure(ground) {
    const contests: ContestResult[] = [];
    for (const one of works) contests.push(await measure(ground, one));
    return { ...nothing(), contests };
  },
};
