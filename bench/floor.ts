/** `npm run bench:floor [-- rounds]`: how the engine stands against plain C, SciPy and itself, as ratios from one run on one core. */
import { createEngine } from "../src/index.js";
import { figures, type Figure } from "./figures.js";
import { describeHost, keepToOneCore } from "./host.js";
import { Match, type Outcome } from "./match.js";
import { writeResult } from "./resultFile.js";
import { digits, printTable } from "./table.js";
import { flags, gccVersion } from "./yardsticks/plainC.js";
import { scipyVersion } from "./yardsticks/scipy.js";
import { makeWorkFolder } from "./yardsticks/workFolder.js";

const turns = 11;
const rounds = Number(process.argv[2] ?? 3);

const core = keepToOneCore();
const versions = { gcc: gccVersion(), scipy: scipyVersion() };
const host = describeHost(core, versions);
const missing = { "plain C": versions.gcc === undefined, "SciPy": versions.scipy === undefined, "case": false };
if (missing["plain C"]) console.log("plain C is skipped: there is no gcc");
else console.log(`${versions.gcc}: gcc ${flags.join(" ")}`);
if (missing["SciPy"]) console.log("SciPy is skipped: there is no python3 with scipy");
else console.log(`${versions.scipy}: one thread`);
console.log(`${host.processor}, core ${core}, node ${process.versions.node}; ${rounds} rounds of ${turns} turns, processor time\n`);

const engine = await createEngine({ build: "simd" });
const folder = makeWorkFolder();
const measured = figures.filter(({ against }) => !missing[against.kind]);
const matches = measured.map((figure) => new Match(engine, figure, folder));
for (let round = 0; round < rounds; round += 1) for (const match of matches) await match.round(turns);
const outcomes: Outcome[] = [];
for (const match of matches) outcomes.push(await match.outcome());
engine.dispose();

const verdictOf = ({ limit }: Figure, ratio: number): string => (limit === undefined ? "for information" : ratio <= limit ? "holds" : "MISSED");
const results = measured.map((figure, index) => ({
  case: figure.subject.name,
  per: figure.perSample === true ? "sample" : "run",
  limit: figure.limit ?? null,
  verdict: verdictOf(figure, outcomes[index]!.ratio),
  ...outcomes[index]!,
}));

printTable(
  ["case", "ms", "held against", "ms", "ratio", "by round", "at most", ""],
  results.map(({ subject, against, ratio, rounds: each, limit, verdict, per }) => [
    subject.name,
    digits(subject.milliseconds.median),
    `${against[0]!.name}${per === "sample" ? ", a sample" : ""}`,
    digits(against[0]!.milliseconds.median),
    ratio.toFixed(2),
    each.map((one) => one.toFixed(2)).join(" "),
    limit === null ? "" : String(limit),
    verdict,
  ]),
);
writeResult("floor", host, { clock: "processor time", flags, turns, rounds, figures: results, skipped: figures.length - measured.length });
if (results.some(({ verdict }) => verdict === "MISSED")) process.exitCode = 1;
