import { boxBytes, directBytes, inFloats, onFloats, separableBytes, type Case } from "../cases.js";
import { hold, type ContestResult } from "../contest.js";
import { EngineContender } from "../engineContender.js";
import { byteFlags, startBlocked, type BlockedSource } from "../yardsticks/blocked.js";
import { nothing, type Ground, type Group, type GroupResult } from "./group.js";

const most = { ofFloatPath: 0.6, ofC: 1.15 };

/** The same work through working floats: forced by a tolerance of nothing, or, for running sums, on an image of floats. */
const ofFloats = (one: Case): Case => (one.options.method === "running-sum" ? onFloats(one) : inFloats(one));

async function againstFloats({ engine }: Ground, one: Case): Promise<ContestResult> {
  const subject = new EngineContender(engine, one);
  const floats = new EngineContender(engine, ofFloats(one));
  try {
    return await hold({ work: `${one.name}: own f32 path`, subject, rivals: [floats], bar: most.ofFloatPath });
  } finally {
    subject.filter.dispose();
    floats.filter.dispose();
  }
}

async function againstC({ engine, folder }: Ground, source: BlockedSource, one: Case): Promise<ContestResult> {
  const subject = new EngineContender(engine, one);
  const { process, contenders } = await startBlocked(folder, source, one, subject.planes);
  try {
    return await hold({ work: one.name, subject, rivals: contenders, asides: subject.asides(), bar: most.ofC });
  } finally {
    await process.end();
    subject.filter.dispose();
  }
}

async function measure(ground: Ground, pairs: readonly (readonly [BlockedSource, Case])[]): Promise<GroupResult> {
  const contests: ContestResult[] = [];
  for (const [source, one] of pairs) {
    contests.push(await againstFloats(ground, one));
    if (ground.tools["gcc"] !== undefined) contests.push(await againstC(ground, source, one));
  }
  if (ground.tools["gcc"] === undefined) ground.say("C is skipped: there is no gcc");
  else ground.say(`gcc -O3 ${byteFlags.join(" ")}, 128-bit vectors`);
  return { ...nothing(), contests };
}

export const bytes: Group = {
  name: "bytes",
  title: "RGBA bytes, against the own path through floats and against fixed point in C",
  measure: (ground) =>
    measure(ground, [
      ["direct_bytes", directBytes(3)],
      ["direct_bytes", directBytes(5)],
      ["separable_bytes", separableBytes(9)],
      ["separable_bytes", separableBytes(31)],
      ["box_bytes", boxBytes(9)],
      ["box_bytes", boxBytes(101)],
    ]),
};
