/** `npm run bench:fit [-- passes]`: times every method on many questions in both builds, fits prices, measures profiles beside, and writes the least wrong into src/planning. */
import { createEngine, type Build, type Engine, type HardwareProfile } from "../src/index.js";
import { measureProfile } from "../src/measure/index.js";
import { operationWords } from "../src/measure/operationWords.js";
import { operationNames, priceOf, type Counts, type Prices } from "../src/planning/cost.js";
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

async function time(engine: Engine): Promise<Timed[]> {
  const known = new Map<string, Timed>();
  for (let pass = 0; pass < passes; pass += 1) {
    for (const question of shuffled(questions(), seed + pass)) timeQuestion(engine, question, known);
  }
  return [...known.values()];
}

/** Profiles of which the least wrong is shipped: prices fitted to all that was timed, and what `measureProfile` finds by itself. */
interface Contestant {
  name: string;
  prices: Prices;
  judgement: Judgement;
}

const measurements = 3;
const measurementMilliseconds = 8000;

async function contestants(engine: Engine, timings: readonly Timed[], known: Prices): Promise<Contestant[]> {
  const found: Contestant[] = [{ name: "fitted", prices: pricesFrom(timings, known), judgement: crossValidated(timings, known) }];
  for (let k = 1; k <= measurements; k += 1) {
    const { nanoseconds } = await measureProfile(engine, { milliseconds: measurementMilliseconds });
    const prices = nanoseconds as Prices;
    found.push({ name: `measured ${k}`, prices, judgement: judge(timings, prices) });
  }
  return found;
}

/** What choices lose in the mean, and a tenth of how far off predictions are: people read those too. */
const wrongness = ({ judgement: { regret, error } }: Contestant): number => regret.mean + error.median / 10;

const leastWrong = (all: readonly Contestant[]): Contestant => all.reduce((best, one) => (wrongness(one) < wrongness(best) ? one : best));

const howChosen = (all: readonly Contestant[], chosen: Contestant): string =>
  `${chosen.name}, the least wrong of ${all.map(({ name, judgement: { regret, error } }) => `${name} (choices lose ${percent(regret.mean)} in the mean, ${percent(regret.worst)} at worst; times are off by ${percent(error.median)})`).join(", ")}`;

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
const reasons: string[] = [];
const fits: Record<string, unknown>[] = [];
for (const build of builds) {
  const begun = performance.now();
  const engine = await createEngine({ build });
  const timings = await time(engine);
  const known = shippedProfiles.find((profile) => profile.build === build)!.nanoseconds as Prices;
  const all = await contestants(engine, timings, known);
  engine.dispose();
  const chosen = leastWrong(all);
  const { prices } = chosen;
  console.log(`\n${build}: ${timings.length} methods timed in ${((performance.now() - begun) / 1000).toFixed(0)} s`);
  printTable(
    ["operation", "ns each", ""],
    operationNames.map((name) => [name, digits(prices[name]), operationWords[name]]),
  );
  for (const { name, judgement } of all) printJudgement(name === "fitted" ? "fitted: each fifth judged by a fit to the others" : name, judgement);
  printResiduals(timings, prices);
  profiles.push(profileOf(host, build, prices));
  reasons.push(howChosen(all, chosen));
  fits.push({
    build,
    chosen: chosen.name,
    prices,
    contestants: all.map(({ name, judgement }) => ({ name, ...judgement })),
    timings: timings.map((timed) => recordOf(timed, prices)),
  });
}
for (const reason of reasons) console.log(`\nshipped: ${reason}`);
writeResult("fit", host, { clock: "processor time", seed, passes, fits });
writeProfiles(profiles, reasons);
