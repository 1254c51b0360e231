import type { Method } from "../../src/index.js";
import { mostMeasured, type Candidate } from "./candidates.js";
import { kinds } from "./firstSight.js";
import { judgeRuns, measured, type Named } from "./judge.js";
import type { Place } from "./places.js";
import { bestMilliseconds, recordOf, type Campaign, type ProblemRecord } from "./records.js";

/** A regret above this is timed again before it counts. */
const suspicious = 0.1;

/**
 * Single calls are timed on every second problem, where the result is small enough: what some hosts take to give memory to a large new array is
 * many times what any method takes to fill it, and no choice changes that.
 */
const mostResultBytes = 4 * 2 ** 20;
const isCalledOnce = (position: number, { resultBytes }: Candidate): boolean => position % 2 === 0 && resultBytes <= mostResultBytes;

/** Says whether there is time for more, and keeps what was found so far now and then. */
export interface Pace {
  goOn(): boolean;
  found(campaign: Campaign): void;
}

async function measureOne(place: Place, { problem, planned }: Candidate, once: boolean): Promise<ProblemRecord> {
  const { index, name } = problem;
  const methods = planned.map(({ method }) => method);
  const took = await place.call("time", index, methods, false);
  const record: ProblemRecord = { index, name, methods: took.map((one) => recordOf(one, planned)) };
  if (bestMilliseconds(record) > mostMeasured) return { ...record, dropped: true };
  if (once) record.once = await place.call("once", index, took);
  record.explain = await place.call("explain", index);
  return record;
}

/** Measures problems that are not on file yet. */
export async function measureProblems(place: Place, candidates: readonly Candidate[], campaign: Campaign, pace: Pace): Promise<void> {
  const known = new Set(campaign.problems.map(({ index }) => index));
  for (const [position, candidate] of candidates.entries()) {
    if (known.has(candidate.problem.index)) continue;
    if (!pace.goOn()) return;
    campaign.problems.push(await measureOne(place, candidate, isCalledOnce(position, candidate)));
    pace.found(campaign);
  }
  campaign.problems.sort((a, b) => a.index - b.index);
}

/** Times again where a choice of one of the profiles seems to be wrong by more than a tenth. */
export async function confirmRegrets(
  place: Place,
  candidates: readonly Candidate[],
  campaign: Campaign,
  profiles: readonly Named[],
  pace: Pace,
): Promise<void> {
  const doubted = new Map<number, Candidate>();
  for (const { profile } of profiles) {
    for (const { record, candidate, regret } of judgeRuns(measured(campaign.problems, candidates), profile))
      if (regret > suspicious && !record.again) doubted.set(record.index, candidate);
  }
  for (const [index, { planned }] of doubted) {
    if (!pace.goOn()) return;
    const again = await place.call(
      "time",
      index,
      inOrder(
        campaign,
        index,
        planned.map(({ method }) => method),
      ),
      true,
    );
    campaign.problems.find((record) => record.index === index)!.again = again;
    pace.found(campaign);
  }
}

/** The fastest first, so that what has lost is stopped early. */
function inOrder(campaign: Campaign, index: number, methods: readonly Method[]): Method[] {
  const { methods: timed } = campaign.problems.find((record) => record.index === index)!;
  const order = timed.map(({ method }) => method);
  return methods.toSorted((a, b) => order.indexOf(a) - order.indexOf(b));
}

export async function measurePlanning(place: Place, campaign: Campaign, pace: Pace): Promise<void> {
  for (const record of campaign.problems.filter(({ explain, dropped }) => explain === undefined && !dropped)) {
    if (!pace.goOn()) return;
    record.explain = await place.call("explain", record.index);
  }
  const known = new Set(campaign.firstSights.map(({ kernel }) => kernel));
  for (const kind of Object.keys(kinds())) {
    if (known.has(kind)) continue;
    if (!pace.goOn()) return;
    campaign.firstSights.push(...(await place.call("firstSights", kind)));
    pace.found(campaign);
  }
}

/** Measures profiles until there are so many. */
export async function measureProfiles(place: Place, campaign: Campaign, count: number, pace: Pace): Promise<void> {
  while (campaign.profiles.length < count && pace.goOn()) {
    campaign.profiles.push(await place.measureProfile());
    pace.found(campaign);
  }
}
