/**
 * `npm run bench:regret [-- --chromium] [--seconds 50] [--problems 408] [--profile file.json …] [--fresh] [--anew] [--judge]`: how much time the
 * choice of a method loses, on problems that no price was fitted to. What was measured stays in a file and further runs go on from there; --fresh forgets it, --anew
 * forgets the measured profiles and the planning times, --judge times nothing.
 */
import { readFileSync } from "node:fs";
import { parseArgs } from "node:util";
import { findChromium } from "../.build/chromium.mjs";
import type { Build } from "../src/index.js";
import { checkedProfile } from "../src/api/validate/profile.js";
import { shippedProfiles } from "../src/planning/profile.js";
import { keepToOneCore } from "./host.js";
import { makeBundle } from "./regret/bundle.js";
import { candidateAt, candidateCount, candidates } from "./regret/candidates.js";
import { measured, type Named } from "./regret/judge.js";
import { judgement } from "./regret/judgement.js";
import { confirmRegrets, measurePlanning, measureProblems, measureProfiles, type Pace } from "./regret/measuring.js";
import { openChromium, openNode } from "./regret/places.js";
import { printAgreement, printBiases, printPlanning, printRegrets, printWorst } from "./regret/print.js";
import { forgetPlanning, openCampaign, saveCampaign, type Campaign } from "./regret/records.js";

const { values: given } = parseArgs({
  options: {
    chromium: { type: "boolean", default: false },
    seconds: { type: "string" },
    problems: { type: "string", default: String(candidateCount) },
    profile: { type: "string", multiple: true, default: [] },
    fresh: { type: "boolean", default: false },
    anew: { type: "boolean", default: false },
    judge: { type: "boolean", default: false },
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

const core = given.judge ? "" : keepToOneCore();
await makeBundle();
const executablePath = given.chromium ? findChromium() : undefined;
if (given.chromium && executablePath === undefined) throw new Error("No Chromium was found. Install one, or set TAPWISE_CHROMIUM to its path.");
const place = await (executablePath === undefined ? openNode() : openChromium(executablePath));

const build: Build = "simd";
/** Of measuring a profile. */
const repetitions = 10;
const shipped = shippedProfiles.find((profile) => profile.build === build)!;
const all = candidates(build, shipped, wanted);
const byIndex = new Map(all.map((candidate) => [candidate.problem.index, candidate]));
const campaign = openCampaign(place, build, (index) => byIndex.get(index) ?? candidateAt(index, build, shipped), given.fresh);
if (given.anew) forgetPlanning(campaign);

const fromFiles = given.profile.map((path): Named => ({ name: path, profile: checkedProfile(JSON.parse(readFileSync(path, "utf8"))) }));
const measuredHere = (): Named[] => campaign.profiles.map((profile, index) => ({ name: `measured ${index + 1}`, profile }));
const profiles = (): Named[] => [{ name: "shipped", profile: shipped }, ...measuredHere(), ...fromFiles];

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
  const verdict = judgement(judgeable, profiles());
  for (const { name, profile, runs } of verdict.judged.filter(({ name }) => !/^measured \d/.test(name) || name === "measured 1")) {
    console.log(`\n${name}: the worst twenty`);
    printWorst(runs, profile);
    console.log(`\n${name}: where predictions lean`);
    printBiases(runs, profile);
  }
  console.log();
  const explains = judgeable.flatMap(({ record: { explain } }) => explain ?? []);
  const plans = printPlanning(explains, firstSights);
  console.log();
  printRegrets(verdict.lines);
  if (verdict.agreement) printAgreement(verdict.agreement, verdict.choices);
  if (!plans || !verdict.passes) process.exitCode = 1;
  if (!given.judge) console.log(`\nwritten: ${saveCampaign(place, core, campaign, { regrets: verdict.told })}`);
}

async function measureAll(): Promise<void> {
  await measureProblems(place, all, campaign, pace);
  await measureProfiles(place, campaign, repetitions, pace);
  await confirmRegrets(place, all, campaign, profiles(), pace);
  await measurePlanning(place, campaign, pace);
}

try {
  if (!given.judge) await measureAll();
} finally {
  if (!given.judge) saveCampaign(place, core, campaign, {});
  await place.close();
}
if (measured(campaign.problems, all).length === 0) throw new Error("No problem was measured: give it more --seconds.");
conclude(campaign);
if (!pace.goOn()) {
  const known = new Set(campaign.problems.map(({ index }) => index));
  const left = all.filter(({ problem }) => !known.has(problem.index)).length;
  console.log(`The time is over${left > 0 ? `, ${left} of ${all.length} problems are left` : ""}: the same command goes on.`);
}
