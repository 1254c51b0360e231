import { median } from "simple-statistics";
import type { HardwareProfile, Method } from "../../src/index.js";
import { digits, printTable } from "../table.js";
import type { FirstSight } from "./firstSight.js";
import type { Bars, Choices, Judged } from "./judge.js";
import { agreementBars, missed } from "./judge.js";
import { biases, reasonOf, type Prediction, type Reason } from "./reasons.js";
import type { RegretLine } from "./judgement.js";
import { typical, widestPair, type Agreement, type MethodTook } from "./statistics.js";

export const percent = (part: number): string => `${(100 * part).toFixed(1)} %`;

export function printRegrets(lines: readonly RegretLine[]): void {
  const verdict = ({ summary, bars }: RegretLine): string => {
    if (Object.keys(bars).length === 0) return "";
    const misses = missed(summary, bars);
    return misses.length === 0 ? "pass" : `MISS ${misses.map((name) => `${name} > ${percent(bars[name as keyof Bars]!)}`).join(", ")}`;
  };
  printTable(
    ["regret of the choice", "problems", "median", "mean", "p90", "p95", "p99", "worst", ""],
    lines.map((line) => {
      const { problems, ...parts } = line.summary;
      return [line.name, String(problems), ...(["median", "mean", "p90", "p95", "p99", "worst"] as const).map((name) => percent(parts[name])), verdict(line)];
    }),
  );
}

/** Whether repeated measurements of a profile choose alike, and where they do not. */
export function printAgreement({ changed, changedByPairs, apart }: Agreement, choices: readonly Choices[]): void {
  const told = (value: number, bar: number): string => `${percent(value)}, at most ${percent(bar)}: ${value <= bar ? "pass" : "MISS"}`;
  const profiles = choices[0]!.chosen.length;
  console.log(
    `\n${profiles} measured profiles do not all choose the same on ${told(changed, agreementBars.changed)} (two of them on ${percent(changedByPairs)})`,
  );
  console.log(`methods that they choose there are apart by ${told(apart, agreementBars.apart)}`);
  const differing = choices
    .map(({ record, chosen }) => ({
      name: `#${record.index} ${record.name}`,
      chosen,
      methods: [...new Set(chosen.map(({ method }) => method))],
      apart: widestPair(chosen),
    }))
    .filter(({ methods }) => methods.length > 1)
    .toSorted((a, b) => b.apart - a.apart);
  const cell = (chosen: readonly MethodTook[], method: Method): string => {
    const alike = chosen.filter((one) => one.method === method);
    return `${method} ${alike.length} × (${digits(typical(alike[0]!))} ms)`;
  };
  printTable(
    ["where they differ", "apart", "what they choose"],
    differing.map(({ name, chosen, methods, apart: widest }) => [name, percent(widest), methods.map((method) => cell(chosen, method)).join(", ")]),
  );
}

const times = ({ method, measured, stopped, predicted }: Prediction): string[] => [method, `${stopped ? "> " : ""}${digits(measured)}`, digits(predicted)];

/** The mispredicted method, how far off it is, the operation that its prediction mostly consists of, and at which price that would explain it. */
const because = ({ culprit: { method, variant, factor, leading }, price }: Reason): string[] => [
  `${method}, ${variant}`,
  factor.toFixed(2),
  leading.operation,
  `${(100 * leading.share).toFixed(0)} %`,
  price ? price.charged.toPrecision(3) : "",
  price ? price.needed.toPrecision(3) : "no price",
];

/** The worst choices, each with what was mispredicted. */
export function printWorst(judged: readonly Judged[], profile: HardwareProfile, count = 20): void {
  const worst = judged
    .filter(({ regret }) => regret > 0)
    .toSorted((a, b) => b.regret - a.regret)
    .slice(0, count);
  printTable(
    [
      "problem",
      "regret",
      "chosen",
      "ms",
      "predicted",
      "best",
      "ms",
      "predicted",
      "mispredicted",
      "measured ÷ predicted",
      "mostly",
      "of it",
      "ns charged",
      "would fit",
    ],
    worst.map((one) => {
      const reason = reasonOf(one, profile);
      return [`#${one.record.index}`, percent(one.regret), ...times(reason.chosen), ...times(reason.best), ...because(reason)];
    }),
  );
  for (const { record } of worst) console.log(`#${record.index} ${record.name}`);
}

/** Where predictions lean, whether or not a choice was wrong for it. */
export function printBiases(judged: readonly Judged[], profile: HardwareProfile): void {
  printTable(
    ["measured ÷ predicted of", "mostly", "runs", "p10", "median", "p90"],
    biases(judged, profile)
      .filter(({ problems }) => problems >= 5)
      .map(({ variant, operation, problems, p10, median: middle, p90 }) => [
        variant,
        operation,
        String(problems),
        ...[p10, middle, p90].map((one) => one.toFixed(2)),
      ]),
  );
}

/** Largest planning times that are good enough. Milliseconds. */
export const planningBars = { known: 1, firstSight: 10 };

export function printPlanning(known: readonly number[], sights: readonly FirstSight[]): boolean {
  const told = (value: number, bar: number): string => (value <= bar ? "pass" : "MISS");
  const middle = median([...known]);
  console.log(
    `explain, known kernel: median ${digits(middle)} ms over ${known.length} problems, worst ${digits(Math.max(...known))}; at most ${planningBars.known}: ${told(middle, planningBars.known)}`,
  );
  if (sights.length === 0) return middle <= planningBars.known;
  const kinds = [...new Set(sights.map(({ kernel }) => kernel))];
  console.log("\nexplain, 255×255 taps seen for the first time");
  printTable(
    ["kernel", "median ms", "slowest setting's", "single worst", "slowest setting"],
    kinds.map((kind) => {
      const all = sights.filter(({ kernel }) => kernel === kind);
      const slowest = all.reduce((most, one) => (one.medianMilliseconds > most.medianMilliseconds ? one : most));
      return [
        kind,
        digits(median(all.map(({ medianMilliseconds }) => medianMilliseconds))),
        digits(slowest.medianMilliseconds),
        digits(Math.max(...all.map(({ worstMilliseconds }) => worstMilliseconds))),
        slowest.setting,
      ];
    }),
  );
  const worst = sights.reduce((most, one) => (one.medianMilliseconds > most.medianMilliseconds ? one : most));
  console.log(
    `worst: ${worst.kernel}, ${worst.setting}: ${digits(worst.medianMilliseconds)} ms; at most ${planningBars.firstSight}: ${told(worst.medianMilliseconds, planningBars.firstSight)}`,
  );
  return middle <= planningBars.known && worst.medianMilliseconds <= planningBars.firstSight;
}
