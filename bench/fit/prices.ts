import { operationNames, priceOf, type Operation, type Prices } from "../../src/planning/cost.js";
import { judgeBy, questionsOf, type Judgement } from "./judge.js";
import { medianRun, medianSetup, type Timed } from "./measure.js";
import { fitPrices } from "./solve.js";

/** Operations that only preparing counts; what else it counts has its price from the runs. */
const setupNames: readonly Operation[] = ["setup", "setupTap", "setupByte"];
const runNames = operationNames.filter((name) => !setupNames.includes(name));

const foldCount = 5;

/**
 * Prices of runs from timed runs, then prices of preparing from what the preparations took beyond those. What no run counted keeps the
 * price that it had: handing work to other threads is measured by `npm run bench:threads`.
 */
export function pricesFrom(timings: readonly Timed[], known: Prices): Prices {
  const runs = fitPrices(
    timings.map((timed) => ({ counts: timed.work.run, nanoseconds: medianRun(timed), target: medianRun(timed) })),
    runNames,
  );
  const prices = { ...known, ...runs };
  const setups = timings.map((timed) => ({
    counts: timed.work.setup,
    nanoseconds: medianSetup(timed),
    target: medianSetup(timed) - priceOf(timed.work.setup, prices),
  }));
  return { ...prices, ...fitPrices(setups, setupNames) };
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
