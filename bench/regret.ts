/**
 * `npm run bench:regret [-- --chromium] [--seconds 50] [--problems 420] [--profile file.json …] [--fresh]`: how much time the choice of a method
 * loses, on problems that no price was fitted to. What was measured stays in a file, and further runs go on from there.
 */
import { readFileSync } from "node:fs";
import { parseArgs } from "node:util";
import { findChromium } from "../.build/chromium.mjs";
import type { Build, HardwareProfile } from "../src/index.js";
import { shippedProfiles } from "../src/planning/profile.js";
import { keepToOneCore } from "./host.js";
import { makeBundle } from "./regret/bundle.js";
import { candidateCount, candidates } from "./regret/candidates.js";
import { bars, judgeAuto, judgeOnce, judgeRuns, measured, missed, summarise, type Named } from "./regret/judge.js";
import { confirmRegrets, measurePlanning, measureProblems, type Pace } from "./regret/measuring.js";
import { openChromium, openNode } from "./regret/places.js";
import { percent, printBiases, printPlanning, printRegrets, printWorst, type RegretLine } from "./regret/print.js";
import { openCampaign, saveCampaign, type Campaign } from "./regret/records.js";
import { summaryOf } from "./regret/statistics.js";

const { values: given } = parseArgs({
  options: {
    chromium: { type: "boolean", default: false },
    seconds: { type: "string" },
    problems: { type: "string", default: String(candidateCount) },
    profile: { type: "string", multiple: true, default: [] },
    fresh: { type: "boolean", default: false },
  },
});

function numberOf(name: string, text: string): number {
  const value = Number(text);
  if (!(value > 0)) throw new Error(`--${name} is "${text}"; a number above 0 is needed.`);
  return value;
}

const begun = performance.now();
const end = given.seconds === undefined ? Infinity : begun + 1000 * numberOf("seconds", given.seconds);
const wanted = Math.ceil(numberOf("problems", given.problems));

const core = keepToOneCore();
await makeBundle();
const executablePath = given.chromium ? findChromium() : undefined;
if (given.chromium && executablePath === undefined) throw new Error("No Chromium was found. Install one, or set TAPWISE_CHROMIUM to its path.");
const place = await (executablePath === undefined ? openNode() : openChromium(executablePath));

const build: Build = "simd";
const shipped = shippedProfiles.find((profile) => profile.build === build)!;
const all = candidates(build, shipped, wanted);
const campaign = openCampaign(place, build, given.fresh);

const fromFiles = given.profile.map((path): Named => ({ name: path, profile: JSON.parse(readFileSync(path, "utf8")) as HardwareProfile }));
const profiles: Named[] = [{ name: "shipped", profile: shipped }, ...fromFiles];

/** Between two writes of the file. */
const keepEvery = 10_000;
let kept = performance.now();
const pace: Pace = {
  goOn: () => performance.now() < end,
  found(soFar) {
    if (performance.now() - kept < keepEvery) return;
    kept = performance.now();
    saveCampaign(place, core, soFar, {});
  },
};

/** Judgement and file. */
function conclude({ problems, firstSights }: Campaign): void {
  const judgeable = measured(problems, all);
  const judged = profiles.map((named) => ({ ...named, runs: judgeRuns(judgeable, named.profile) }));
  const lines = judged.flatMap(({ name, profile, runs }): RegretLine[] => {
    const limits = name === "shipped" ? bars.shipped : {};
    return [
      { name: `${name}, prepared`, summary: summarise(runs), bars: limits },
      { name: `${name}, single calls`, summary: summaryOf(judgeOnce(judgeable, profile)), bars: limits },
    ];
  });
  lines.push({ name: "auto as it was called, single calls", summary: summaryOf(judgeAuto(judgeable)), bars: {} });
  console.log();
  for (const { name, profile, runs } of judged) {
    console.log(`\n${name}: the worst twenty`);
    printWorst(runs, profile);
    console.log(`\n${name}: where predictions lean`);
    printBiases(runs, profile);
  }
  console.log();
  const plans = printPlanning(
    judgeable.map(({ record: { explain } }) => explain),
    firstSights,
  );
  console.log();
  printRegrets(lines);
  if (!plans || lines.some(({ summary, bars: limits }) => missed(summary, limits).length > 0)) process.exitCode = 1;
  const told = lines.map(({ name, summary }) => ({
    name,
    ...Object.fromEntries(Object.entries(summary).map(([part, value]) => [part, Number(value.toFixed(4))])),
  }));
  console.log(`\nwritten: ${saveCampaign(place, core, campaign, { regrets: told })}`);
}

try {
  await measureProblems(place, all, campaign, pace);
  await confirmRegrets(place, all, campaign, profiles, pace);
  await measurePlanning(place, campaign, pace);
} finally {
  await place.close();
}
if (measured(campaign.problems, all).length === 0) throw new Error("No problem was measured: give it more --seconds.");
conclude(campaign);
const left = all.length - campaign.problems.length;
if (!pace.goOn())
  console.log(
    `The time is over${left > 0 ? `, ${left} problems are left` : ""}: the same command goes on (${percent(campaign.problems.length / all.length)} measured).`,
  );
