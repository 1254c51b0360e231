/** `npm run bench:fit [-- passes]`: times every method on many questions in both builds, fits prices and writes src/planning/profile.ts. */
import { createEngine, type Build, type HardwareProfile } from "../src/index.js";
import { operationNames, operations, priceOf, type Counts, type Prices } from "../src/planning/cost.js";
import { shippedProfiles } from "../src/planning/profile.js";
import { errorOf, judge, type Judgement } from "./fit/judge.js";
import { medianRun, medianSetup, timeQuestion, type Timed } from "./fit/measure.js";
import { crossValidated, pricesFrom } from "./fit/prices.js";
import { questions, seed } from "./fit/problems.js";
import { writeProfiles } from "./fit/writeProfile.js";
import { describeHost, keepToOneCore, type Host } from "./host.js";
import { shuffled } from "./inputs.js";
import { writeResult } from "./resultFile.js";
import { spreadOf } from "./spread.js";
import { digits, printTable } from "./table.js";

const builds: readonly Build[] = ["simd", "scalar"];
const passes = Number(process.argv[2] ?? 2);

async function time(build: Build): Promise<Timed[]> {
  const engine = await createEngine({ build });
  const known = new Map<string, Timed>();
  for (let pass = 0; pass < passes; pass += 1) {
    for (const question of shuffled(questions(), seed + pass)) timeQuestion(engine, question, known);
  }
  engine.dispose();
  return [...known.values()];
}

const percent = (part: number): string => `${(100 * part).toFixed(1)} %`;

function printJudgement(title: string, { regret, error, setupError }: Judgement): void {
  console.log(`\n${title}`);
  console.log(
    `  regret of the choice     mean ${percent(regret.mean)}, p90 ${percent(regret.p90)}, worst ${percent(regret.worst)} (${regret.worstAt}), ${regret.questions} questions`,
  );
  for (const [what, { median, p90, worst, worstAt }] of [
    ["error of predicted runs  ", error],
    ["error of preparing       ", setupError],
  ] as const)
    console.log(`  ${what}median ${percent(median)}, p90 ${percent(p90)}, worst ${percent(worst)} (${worstAt})`);
}

function printResiduals(timings: readonly Timed[], prices: Prices): void {
  const worst = timings.toSorted((a, b) => Math.abs(errorOf(b, prices)) - Math.abs(errorOf(a, prices))).slice(0, 12);
  console.log("\nlargest residuals");
  printTable(
    ["question", "method", "processor ms", "predicted ms", "error"],
    worst.map((timed) => [
      timed.question,
      timed.method,
      digits(medianRun(timed) / 1e6),
      digits(priceOf(timed.work.run, prices) / 1e6),
      percent(errorOf(timed, prices)),
    ]),
  );
}

const recordOf = (timed: Timed, prices: Prices): Record<string, unknown> => ({
  question: timed.question,
  method: timed.method,
  nanoseconds: spreadOf(timed.runs),
  predicted: Number(priceOf(timed.work.run, prices).toPrecision(5)),
  setupNanoseconds: medianSetup(timed),
  setupPredicted: Number(priceOf(timed.work.setup, prices).toPrecision(5)),
  counts: withoutZeros(timed.work.run),
  setupCounts: withoutZeros(timed.work.setup),
});

const withoutZeros = (counts: Counts): Counts => Object.fromEntries(Object.entries(counts).filter(([, count]) => count !== 0));

const profileOf = (host: Host, build: Build, prices: Prices): HardwareProfile => ({
  version: 2,
  host: `${host.processor}, node ${host.versions["node"]}`,
  build,
  threads: 1,
  date: host.date.slice(0, 10),
  nanoseconds: prices,
});

const host = describeHost(keepToOneCore());
const profiles: HardwareProfile[] = [];
const fits: Record<string, unknown>[] = [];
for (const build of builds) {
  const begun = performance.now();
  const timings = await time(build);
  const known = shippedProfiles.find((profile) => profile.build === build)!.nanoseconds as Prices;
  const prices = pricesFrom(timings, known);
  const fitted = judge(timings, prices);
  const validated = crossValidated(timings, known);
  console.log(`\n${build}: ${timings.length} methods timed in ${((performance.now() - begun) / 1000).toFixed(0)} s`);
  printTable(
    ["operation", "ns each", ""],
    operationNames.map((name) => [name, digits(prices[name]), operations[name]]),
  );
  printJudgement("fitted to all", fitted);
  printJudgement("each fifth judged by a fit to the others", validated);
  printResiduals(timings, prices);
  profiles.push(profileOf(host, build, prices));
  fits.push({ build, prices, fitted, validated, timings: timings.map((timed) => recordOf(timed, prices)) });
}
writeResult("fit", host, { clock: "processor time", seed, passes, fits });
writeProfiles(profiles);
