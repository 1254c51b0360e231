import { median, quantile } from "simple-statistics";
import type { HardwareProfile, Method } from "../../src/index.js";
import { operationNames, type Operation, type Prices } from "../../src/planning/cost.js";
import type { Judged } from "./judge.js";
import { predictedRun, type Planned } from "./planned.js";
import { settled, tookOf } from "./records.js";
import { bestOf, typical, wasStopped, type MethodTook } from "./statistics.js";

/** An operation's part in a prediction. */
export interface Contribution {
  operation: Operation;
  milliseconds: number;
  share: number;
}

/** What a prediction is made of, the dearest operation first. */
export function contributions({ work }: Planned, profile: HardwareProfile): Contribution[] {
  const prices = profile.nanoseconds as Prices;
  const parts = operationNames.map((operation) => ({ operation, milliseconds: ((work.run[operation] ?? 0) * prices[operation]) / 1e6 }));
  const sum = parts.reduce((total, { milliseconds }) => total + milliseconds, 0);
  return parts
    .filter(({ milliseconds }) => milliseconds > 0)
    .map((part) => ({ ...part, share: part.milliseconds / sum }))
    .toSorted((a, b) => b.milliseconds - a.milliseconds);
}

/** A method's prediction beside its time. */
export interface Prediction {
  method: Method;
  variant: string;
  measured: number;
  /** True where it was stopped: it takes longer than `measured`. */
  stopped: boolean;
  predicted: number;
  /** measured ÷ predicted. */
  factor: number;
  /** The operation that its prediction mostly consists of. */
  leading: Contribution;
}

function predictionOf(took: MethodTook, planned: readonly Planned[], profile: HardwareProfile): Prediction {
  const plan = planned.find(({ method }) => method === took.method)!;
  const predicted = predictedRun(plan, profile);
  const measured = typical(took);
  return {
    method: took.method,
    variant: plan.variant,
    measured,
    stopped: wasStopped(took),
    predicted,
    factor: measured / predicted,
    leading: contributions(plan, profile)[0]!,
  };
}

/** Why a choice was wrong: which of the two methods was mispredicted, and by which operation. */
export interface Reason {
  judged: Judged;
  chosen: Prediction;
  best: Prediction;
  /** The one of the two whose prediction is further off. */
  culprit: Prediction;
  /** Nanoseconds at which the culprit's leading operation would explain its time, and what it is charged at. Nothing where no price ≥ 0 does. */
  price?: { needed: number; charged: number };
}

export function reasonOf(judged: Judged, profile: HardwareProfile): Reason {
  const { record, candidate } = judged;
  const [chosen, best] = [tookOf(record, judged.chosen), bestOf(settled(record))].map((took) => predictionOf(took, candidate.planned, profile)) as [
    Prediction,
    Prediction,
  ];
  const culprit = Math.abs(Math.log(chosen.factor)) >= Math.abs(Math.log(best.factor)) ? chosen : best;
  const charged = (profile.nanoseconds as Prices)[culprit.leading.operation];
  const needed = charged * (1 + (culprit.measured - culprit.predicted) / culprit.leading.milliseconds);
  return { judged, chosen, best, culprit, ...(needed >= 0 ? { price: { needed, charged } } : {}) };
}

/** How far off predictions are that mostly consist of one operation. */
export interface Bias {
  variant: string;
  operation: Operation;
  problems: number;
  /** measured ÷ predicted: its tenth, median and ninetieth part. */
  p10: number;
  median: number;
  p90: number;
}

/** Where the model leans: predictions grouped by method and leading operation, the largest groups first. */
export function biases(all: readonly Judged[], profile: HardwareProfile): Bias[] {
  const groups = new Map<string, Prediction[]>();
  for (const { record, candidate } of all) {
    for (const took of settled(record)) {
      if (wasStopped(took)) continue;
      const prediction = predictionOf(took, candidate.planned, profile);
      const key = `${prediction.method} of ${prediction.variant}, ${prediction.leading.operation}`;
      groups.set(key, [...(groups.get(key) ?? []), prediction]);
    }
  }
  return [...groups.values()]
    .map((group) => {
      const factors = group.map(({ factor }) => factor);
      const [{ method, variant, leading }] = group as [Prediction];
      return {
        variant: `${method}, ${variant}`,
        operation: leading.operation,
        problems: group.length,
        p10: quantile(factors, 0.1),
        median: median(factors),
        p90: quantile(factors, 0.9),
      };
    })
    .toSorted((a, b) => b.problems - a.problems);
}
