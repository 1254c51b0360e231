import { estimate } from "../../src/measure/estimate.js";
import type { Prices } from "../../src/planning/cost.js";
import { judgeBy, questionsOf, type Judgement } from "./judge.js";
import { medianSetup, medianRun, type Timed } from "./measure.js";

const foldCount = 5;

/** Standard errors as shares: of a median of many runs, and of preparations, much of which is JavaScript whose time no count tells. */
const noise = { run: 0.02, setup: 0.5 };

/**
 * Prices from timed runs and preparations, by the estimator of `measureProfile`. What no run counted keeps its proportion to the prices that it had: handing
 * work to other threads is measured by `npm run bench:threads`.
 */
export function pricesFrom(timings: readonly Timed[], known: Prices): Prices {
  const runs = timings.map((timed) => ({ counts: timed.work.run, nanoseconds: medianRun(timed), noise: noise.run }));
  const setups = timings.map((timed) => ({ counts: timed.work.setup, nanoseconds: medianSetup(timed), noise: noise.setup }));
  const { prices } = estimate([...runs, ...setups], known);
  const { handOver, meeting, handedByte } = known;
  return { ...prices, handOver, meeting, handedByte };
}

/** Judges every question by prices fitted to the other four fifths. */
export function crossValidated(timings: readonly Timed[], known: Prices): Judgement {
  const questions = questionsOf(timings);
  const foldOf = (question: string): number => questions.indexOf(question) % foldCount;
  const folds = Array.from({ length: foldCount }, (_, fold) =>
    pricesFrom(
      timings.filter(({ question }) => foldOf(question) !== fold),
      known,
    ),
  );
  return judgeBy(timings, (question) => folds[foldOf(question)]!);
}
