import type { ContestResult } from "../contest.js";
import type { LoopTime } from "../loops.js";

/** A line of the table from two loops, or from a loop and what it may take. */
export function loopContest(
  work: string,
  subject: LoopTime,
  rival: LoopTime,
  allowed: { weight: number; bar: number; largestDifference?: number },
): ContestResult {
  const { weight, bar, largestDifference } = allowed;
  const ratio = subject.milliseconds.median / (rival.milliseconds.median * weight);
  const ends = [subject.milliseconds.p25, subject.milliseconds.p75].map((one) => Number((one / (rival.milliseconds.median * weight)).toFixed(3)));
  return {
    work,
    ratio: Number(ratio.toFixed(3)),
    ratioByTurns: [ends[0]!, ends[1]!],
    bar,
    verdict: ratio <= bar ? "pass" : "MISS",
    subject: { name: subject.name, milliseconds: subject.milliseconds, ...(largestDifference === undefined ? {} : { largestDifference }) },
    rivals: [{ name: rival.name, milliseconds: rival.milliseconds }],
    asides: [],
  };
}
