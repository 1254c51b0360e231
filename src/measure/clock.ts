import { ConvolutionError } from "../errors.js";
import type { Pacing } from "../runtime/pacing.js";

/** The time, and a way to let others run: the host's, or a test's own. */
export type Clock = Pacing;

/** A clock that says the same this often in a row stands still: about a second of asking on any machine. */
const mostQuestions = 20_000_000;
const mostSteps = 25;
const mostBackwards = 12;
const mostMilliseconds = 30;

const stopped = (what: string): ConvolutionError =>
  new ConvolutionError("clock-unusable", `The clock ${what}, so nothing can be timed. Measure on a host whose performance.now() counts.`, {
    expected: "a clock that moves forward",
    received: what,
  });

/**
 * The clock's step in milliseconds: the median of a few. Hardened browsers make steps coarse and uneven, and a busy machine takes pauses that are none.
 *
 * @throws ConvolutionError `clock-unusable` where it stands still or runs backwards all the time
 */
export function clockStep(clock: Clock): number {
  const begun = clock.now();
  const steps: number[] = [];
  let [before, backwards] = [begun, 0];
  for (let question = 0; question < mostQuestions; question++) {
    const now = clock.now();
    if (now === before) continue;
    if (now > before) {
      steps.push(now - before);
    } else if (++backwards > mostBackwards) throw stopped("runs backwards");
    before = now;
    if (steps.length >= mostSteps || (steps.length > 1 && now - begun > mostMilliseconds)) break;
  }
  const step = steps.toSorted((a, b) => a - b)[steps.length >> 1];
  if (step === undefined || !Number.isFinite(step)) throw stopped(backwards > 0 ? "runs backwards" : "stands still");
  return step;
}

/** Waits for whatever else the host has to do. */
export const rest = (clock: Clock): Promise<void> => new Promise((resume) => clock.yield(resume));
