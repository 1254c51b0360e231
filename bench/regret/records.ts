import type { HardwareProfile, Method } from "../../src/index.js";
import { operationNames, type Counts } from "../../src/planning/cost.js";
import { describeHost } from "../host.js";
import { readResult, saveResult } from "../resultFile.js";
import type { Candidate } from "./candidates.js";
import type { FirstSight } from "./firstSight.js";
import type { OnceTook } from "./once.js";
import type { Planned } from "./planned.js";
import { seed } from "./problems.js";
import { timesOf, typical, wasStopped, type MethodTook } from "./statistics.js";

/** A method's time with what a run counts, for those who fit prices: pairs [operation by its place in the file's list, count]. Not where it was stopped. */
export type TimedMethod = MethodTook & { run?: number[] };

/** What was measured on a problem. The problem itself is rebuilt from seed and index. */
export interface ProblemRecord {
  index: number;
  name: string;
  methods: TimedMethod[];
  /** Timed again, with more turns, because a choice had seemed to be wrong: counts in place of the first. */
  again?: MethodTook[];
  /** Single calls with a kernel that is new. */
  once?: OnceTook[];
  /** Milliseconds of `explain` with a known kernel; nothing where it is to be timed anew. */
  explain?: number;
  /** True where even the best method took more than a second: not judged. */
  dropped?: true;
}

/** What a campaign has found so far: a file that is valid after every step. */
export interface Campaign {
  clock: string;
  build: string;
  seed: number;
  /** Names of the counted operations, by the numbers that stand for them. */
  operations: readonly string[];
  problems: ProblemRecord[];
  firstSights: FirstSight[];
  /** As measured here, one after the other. */
  profiles: HardwareProfile[];
}

const what = "regret";

const pairs = (counts: Counts): number[] => operationNames.flatMap((name, operation) => (counts[name] ? [operation, Number(counts[name].toPrecision(3))] : []));

export function recordOf({ method, ...took }: MethodTook, planned: readonly Planned[]): TimedMethod {
  if (wasStopped(took)) return { method, atLeast: took.atLeast };
  const { work } = planned.find((one) => one.method === method)!;
  return { method, milliseconds: timesOf(took.milliseconds), run: pairs(work.run) };
}

/** What counts: the second timing where there is one. */
export const settled = ({ methods, again }: ProblemRecord): readonly MethodTook[] => again ?? methods;

export const tookOf = (record: ProblemRecord, method: Method): MethodTook => {
  const took = settled(record).find((one) => one.method === method);
  if (!took) throw new Error(`${record.name}: ${method} was not timed. Methods have changed since: begin anew with --fresh.`);
  return took;
};

export const bestMilliseconds = (record: ProblemRecord): number => Math.min(...settled(record).map(typical));

/** Only profiles that have a price for every operation, as engines take them. */
const isComplete = (profile: HardwareProfile): boolean => operationNames.every((name) => Number.isFinite(profile.nanoseconds[name]));

/**
 * The campaign that is on file for this host, or a new one. Problems that are drawn otherwise today are left out, and so are profiles that lack a
 * price; what is counted is counted again.
 */
export function openCampaign(
  place: { name: string; clock: string },
  build: string,
  candidateOf: (index: number) => Candidate | undefined,
  fresh: boolean,
): Campaign {
  const empty: Campaign = { clock: place.clock, build, seed, operations: operationNames, problems: [], firstSights: [], profiles: [] };
  const known = fresh ? undefined : (readResult(what, describeHost(""), place.name) as Campaign | undefined);
  if (known === undefined || known.seed !== seed || known.build !== build) return empty;
  const problems = known.problems.flatMap((record): ProblemRecord[] => {
    const candidate = candidateOf(record.index);
    if (candidate?.problem.name !== record.name) return [];
    return [{ ...record, methods: record.methods.map((one) => recordOf(one, candidate.planned)) }];
  });
  return { ...empty, problems, firstSights: known.firstSights, profiles: known.profiles.filter(isComplete) };
}

/** Planning times and measured profiles are thrown away: planning or measuring has changed. */
export function forgetPlanning(campaign: Campaign): void {
  campaign.profiles = [];
  campaign.firstSights = [];
  for (const record of campaign.problems) delete record.explain;
}

export function saveCampaign(place: { name: string }, core: string, campaign: Campaign, judgement: Record<string, unknown>): string {
  const versions = place.name.startsWith("Chromium") ? { chromium: place.name.split(" ")[1] } : {};
  return saveResult(what, describeHost(core, versions), { ...judgement, ...campaign }, place.name);
}
