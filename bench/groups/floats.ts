import { directFloats, separableFloats, type Case } from "../cases.js";
import { hold, type ContestResult } from "../contest.js";
import { EngineContender } from "../engineContender.js";
import { blockedProgram, floatFlags, startBlocked, type BlockedSource } from "../yardsticks/blocked.js";
import { nothing, together, type Ground, type Group, type GroupResult } from "./group.js";

/** One case against every blocking in C. */
export async function againstBlocks({ engine, folder }: Ground, source: BlockedSource, one: Case, bar: number): Promise<ContestResult> {
  const subject = new EngineContender(engine, one);
  const { process, contenders } = await startBlocked(folder, source, one, subject.planes);
  try {
    return await hold({ work: one.name, subject, rivals: contenders, asides: subject.asides(), bar });
  } finally {
    await process.end();
    subject.filter.dispose();
  }
}

async function measure(ground: Ground, source: BlockedSource, cases: readonly Case[], meanBar: number): Promise<GroupResult> {
  if (ground.tools["gcc"] === undefined) {
    ground.say("skipped: there is no gcc");
    return nothing();
  }
  ground.say(`gcc -O3 ${floatFlags.join(" ")}; "compile" in place of a group makes all programs beforehand`);
  const results: ContestResult[] = [];
  for (const one of cases) results.push(await againstBlocks(ground, source, one, 1.15));
  return together("C blocks", results, meanBar);
}

const onOneAndFourChannels = (sizes: readonly number[], caseOf: (size: number, channels: 1 | 4) => Case): Case[] =>
  sizes.flatMap((size) => ([1, 4] as const).map((channels) => caseOf(size, channels)));

const directCases = onOneAndFourChannels([3, 5, 7, 9, 11, 15], directFloats);
const separableCases = onOneAndFourChannels([9, 31, 63], separableFloats);

export const direct: Group = {
  name: "direct",
  title: "direct, f32, against C in the best of several blockings",
  measure: (ground) => measure(ground, "direct_blocked", directCases, 1.05),
  compile: () => directCases.forEach((one) => blockedProgram("direct_blocked", one)),
};

export const separable: Group = {
  name: "separable",
  title: "separable, f32, against C in the best of several blockings",
  measure: (ground) => measure(ground, "separable_blocked", separableCases, 1),
  compile: () => separableCases.forEach((one) => blockedProgram("separable_blocked", one)),
};
