import { quantile } from "simple-statistics";
import { priceOf, type Prices } from "../../src/planning/cost.js";
import { medianRun, medianSetup, type Timed } from "./measure.js";

/** How well prices serve: by what a choice costs, and by how far off predictions are. */
export interface Judgement {
  /** Time of the choice over that of the fastest, less 1, over questions with at least two timed methods. */
  regret: { mean: number; p90: number; worst: number; worstAt: string; questions: number };
  /** |predicted ÷ measured − 1| over all methods timed: of a run, and of preparing. */
  error: Errors;
  setupError: Errors;
}

interface Errors {
  median: number;
  p90: number;
  worst: number;
  worstAt: string;
}

const predicted = (timed: Timed, prices: Prices): number => priceOf(timed.work.run, prices);
export const errorOf = (timed: Timed, prices: Prices): number => predicted(timed, prices) / medianRun(timed) - 1;
const setupErrorOf = (timed: Timed, prices: Prices): number => priceOf(timed.work.setup, prices) / medianSetup(timed) - 1;

export function judge(timings: readonly Timed[], prices: Prices): Judgement {
  return judgeBy(timings, () => prices);
}

/** The same, where each question is judged by prices that were fitted without it. */
export function judgeBy(timings: readonly Timed[], pricesFor: (question: string) => Prices): Judgement {
  const regrets = questionsOf(timings)
    .map((name) => ({ name, methods: timings.filter(({ question }) => question === name) }))
    .filter(({ methods }) => methods.length > 1)
    .map(({ name, methods }) => ({ name, regret: regretOf(methods, pricesFor(name)) }));
  const worstRegret = regrets.reduce((worst, one) => (one.regret > worst.regret ? one : worst));
  const allRegrets = regrets.map(({ regret }) => regret);
  return {
    regret: {
      mean: allRegrets.reduce((sum, regret) => sum + regret, 0) / allRegrets.length,
      p90: quantile(allRegrets, 0.9),
      worst: worstRegret.regret,
      worstAt: worstRegret.name,
      questions: regrets.length,
    },
    error: summedUp(timings, (timed) => errorOf(timed, pricesFor(timed.question))),
    setupError: summedUp(timings, (timed) => setupErrorOf(timed, pricesFor(timed.question))),
  };
}

function summedUp(timings: readonly Timed[], errorFor: (timed: Timed) => number): Errors {
  const errors = timings.map((timed) => ({ name: `${timed.question}, ${timed.method}`, error: Math.abs(errorFor(timed)) }));
  const worst = errors.reduce((largest, one) => (one.error > largest.error ? one : largest));
  const all = errors.map(({ error }) => error);
  return { median: quantile(all, 0.5), p90: quantile(all, 0.9), worst: worst.error, worstAt: worst.name };
}

export const questionsOf = (timings: readonly Timed[]): string[] => [...new Set(timings.map(({ question }) => question))];

function regretOf(methods: readonly Timed[], prices: Prices): number {
  const chosen = methods.reduce((best, one) => (predicted(one, prices) < predicted(best, prices) ? one : best));
  return medianRun(chosen) / Math.min(...methods.map(medianRun)) - 1;
}
