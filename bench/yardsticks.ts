/**
 * `npm run bench:yardsticks [-- group …]`: how the engine stands against the yardsticks, as ratios from one run on one core.
 * `npm run bench:yardsticks -- compile`: makes the programs in C that take the compiler long, and measures nothing.
 */
import { createEngine } from "../src/index.js";
import { groups } from "./groups/groups.js";
import type { Group, GroupResult } from "./groups/group.js";
import { describeHost, keepToOneCore } from "./host.js";
import { turns } from "./contest.js";
import { mergeResult } from "./resultFile.js";
import { printContests } from "./contestTable.js";
import { findTools } from "./yardsticks/tools.js";
import { makeWorkFolder } from "./yardsticks/workFolder.js";

const wanted = process.argv.slice(2);
if (wanted.join() === "compile") {
  for (const group of groups) group.compile?.();
  process.exit();
}
const unknown = wanted.filter((name) => groups.every((group) => group.name !== name));
if (unknown.length > 0) throw new Error(`no group is called ${unknown.join(", ")}; there are ${groups.map(({ name }) => name).join(", ")}`);
const chosen = wanted.length === 0 ? groups : groups.filter(({ name }) => wanted.includes(name));

const core = keepToOneCore();
const tools = findTools();
const host = describeHost(core, tools);
console.log(`${host.processor}, core ${core}, node ${process.versions.node}; medians of ${turns} turns, processor time`);

const engine = await createEngine({ build: "simd" });
const ground = { engine, folder: makeWorkFolder(), tools, say: (line: string) => console.log(line) };

async function measured(group: Group): Promise<GroupResult> {
  const begun = performance.now();
  console.log(`\n${group.name}: ${group.title}`);
  const result = await group.measure(ground);
  printContests(result);
  console.log(`${((performance.now() - begun) / 1000).toFixed(0)} s`);
  return result;
}

let missed = 0;
for (const group of chosen) {
  const result = await measured(group);
  if (result.contests.length + Object.keys(result.notes).length === 0) continue;
  missed += [...result.contests, ...result.means].filter(({ verdict }) => verdict === "MISS").length;
  mergeResult("yardsticks", host, "groups", { [group.name]: { title: group.title, host, turns, ...result } });
}
engine.dispose();
if (missed > 0) console.log(`${missed} bars missed`);
process.exitCode = missed > 0 ? 1 : 0;
