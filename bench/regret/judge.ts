import type { HardwareProfile, Method } from "../../src/index.js";
import type { Candidate } from "./candidates.js";
import { choiceOf, planningProblem } from "./planned.js";
import { settled, tookOf, type ProblemRecord } from "./records.js";
import { regretOf, summaryOf, type MethodTook, type RegretSummary, type Took } from "./statistics.js";

/** How a profile's choice fared on a problem. */
export interface Judged {
  record: ProblemRecord;
  candidate: Candidate;
  chosen: Method;
  regret: number;
}

/** A profile with a name for tables. */
export interface Named {
  name: string;
  profile: HardwareProfile;
}

/** Problems that were measured, with what planning needs to know of them. */
export function measured(records: readonly ProblemRecord[], candidates: readonly Candidate[]): { record: ProblemRecord; candidate: Candidate }[] {
  const byIndex = new Map(records.map((record) => [record.index, record]));
  return candidates.flatMap((candidate) => {
    const record = byIndex.get(candidate.problem.index);
    return record && !record.dropped ? [{ record, candidate }] : [];
  });
}

export type Measured = ReturnType<typeof measured>[number];

const choiceFor = ({ problem, kernel }: Candidate, profile: HardwareProfile, once: boolean): Method =>
  choiceOf(planningProblem(problem, kernel, profile.build), profile, once);

/** The regret of prepared filters. */
export function judgeRuns(all: readonly Measured[], profile: HardwareProfile): Judged[] {
  return all.map(({ record, candidate }) => {
    const chosen = choiceFor(candidate, profile, false);
    return { record, candidate, chosen, regret: regretOf(tookOf(record, chosen), settled(record)) };
  });
}

/** The regret of single calls, by the calls of the method that the profile chooses for them. */
export function judgeOnce(all: readonly Measured[], profile: HardwareProfile): number[] {
  return all.flatMap(({ record: { once }, candidate }) => {
    if (!once) return [];
    const forced = once.filter(({ method }) => method !== "auto");
    const chosen = choiceFor(candidate, profile, true);
    return [
      regretOf(
        forced.find(({ method }) => method === chosen)!,
        forced,
      ),
    ];
  });
}

/** The regret of `auto` as it was called, its own planning included, against the best forced method. */
export function judgeAuto(all: readonly Measured[]): number[] {
  return all.flatMap(({ record: { once } }) => {
    if (!once) return [];
    const auto: Took = once.find(({ method }) => method === "auto")!;
    return [regretOf(auto, once)];
  });
}

/** A problem with what each of several profiles chooses. */
export interface Choices {
  record: ProblemRecord;
  chosen: MethodTook[];
}

export const choicesOf = (all: readonly Measured[], profiles: readonly HardwareProfile[]): Choices[] =>
  all.map(({ record, candidate }) => ({ record, chosen: profiles.map((profile) => tookOf(record, choiceFor(candidate, profile, false))) }));

export interface Bars {
  median?: number;
  p95?: number;
  p99?: number;
}

/** Largest regrets that are good enough. */
export const bars: { shipped: Bars; measured: Bars } = { shipped: { p95: 0.4 }, measured: { median: 0.01, p95: 0.1, p99: 0.3 } };
/** Repeated measurements of a profile. */
export const agreementBars = { changed: 0.03, apart: 0.1 };

export const missed = (summary: RegretSummary, limits: Bars): string[] =>
  (Object.keys(limits) as (keyof Bars)[]).filter((name) => summary[name] > limits[name]!);

export const summarise = (judged: readonly Judged[]): RegretSummary => summaryOf(judged.map(({ regret }) => regret));
