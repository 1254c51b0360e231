/** `npm run bench:compare -- A B`: what got faster or slower from result file A to result file B, beyond the noise. */
import { readFileSync } from "node:fs";
import { compareResults, fewestSamples, leastChange } from "./comparison.js";
import type { Host } from "./host.js";
import { digits, printTable } from "./table.js";

const [first, second] = process.argv.slice(2);
if (first === undefined || second === undefined) {
  console.error("Two result files are needed: npm run bench:compare -- before.json after.json");
  process.exit(2);
}

const read = (path: string): { host?: Host } => JSON.parse(readFileSync(path, "utf8")) as { host?: Host };
const [before, after] = [read(first), read(second)];
const { changes, onlyBefore, onlyAfter } = compareResults(before, after);
const measuredOn = ({ host }: { host?: Host }): string =>
  host
    ? `${host.processor}, ${Object.entries(host.versions)[0]!.join(" ")}, commit ${host.commit.slice(0, 7)}${host.changed ? " with changes" : ""}, ${host.date}`
    : "unknown";

console.log(`A  ${first}: ${measuredOn(before)}\nB  ${second}: ${measuredOn(after)}`);
if (before.host?.processor !== after.host?.processor) console.log("warning: the processors differ, so that changes need not come from the code");
const told = changes.filter(({ verdict }) => verdict === "faster" || verdict === "slower");
console.log();
if (told.length > 0)
  printTable(
    ["case", "A ms", "B ms", "B ÷ A", ""],
    told.map(({ name, before: old, after: now, ratio, verdict }) => [name, digits(old.median), digits(now.median), ratio.toFixed(3), verdict]),
  );
const count = (verdict: string): number => changes.filter((change) => change.verdict === verdict).length;
console.log(
  `\n${count("faster")} faster, ${count("slower")} slower, ${count("within the noise")} within the noise, ${count("too few samples")} of fewer than ${fewestSamples} samples`,
);
console.log(`rule: intervals of the medians (± 1.57 · interquartile range ÷ √samples) do not overlap, and medians differ by ${100 * leastChange} % at least`);
for (const [file, names] of [
  ["A", onlyBefore],
  ["B", onlyAfter],
] as const)
  if (names.length > 0) console.log(`only in ${file}: ${names.join("; ")}`);
