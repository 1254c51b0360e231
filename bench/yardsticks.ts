/** `npm run bench:yardsticks`: how fast plain C and SciPy are here, without the engine. */
import { cases, type Case } from "./cases.js";
import { inTurns, warm, type Contender } from "./contender.js";
import { describeHost, keepToOneCore } from "./host.js";
import { planesOf } from "./inputs.js";
import { writeResult } from "./resultFile.js";
import { spreadOf, type Spread } from "./spread.js";
import { digits, printTable } from "./table.js";
import { verify, yardstickTolerance } from "./verify.js";
import { flags, formsOf, gccVersion, startPlainC, type PlainLoops } from "./yardsticks/plainC.js";
import type { YardstickProcess } from "./yardsticks/process.js";
import { scipyForms, scipyVersion, startScipy } from "./yardsticks/scipy.js";
import { makeWorkFolder } from "./yardsticks/workFolder.js";

const turns = 11;

interface Row {
  case: string;
  yardstick: string;
  milliseconds: Spread;
  /** Plain C without the padded copy. */
  loopMilliseconds?: Spread;
  largestDifference: number;
}

async function measure(one: Case, contender: Contender, process: YardstickProcess): Promise<Row> {
  const planes = planesOf(one.layout);
  await warm([contender], planes.length);
  const [times] = await inTurns([contender], planes.length, turns);
  await contender.run(0);
  return {
    case: one.name,
    yardstick: contender.name,
    milliseconds: spreadOf(times!),
    largestDifference: verify(one, planes[0]!, await process.result(), yardstickTolerance),
  };
}

async function measureAll(one: Case, start: (planes: Float32Array[]) => YardstickProcess, forms: readonly string[], maker: string): Promise<Row[]> {
  const process = start(planesOf(one.layout).map(({ data }) => data as Float32Array));
  const rows: Row[] = [];
  for (const form of forms) {
    const row = await measure(one, process.contender(`${maker} ${form}`, form), process);
    if (maker === "C") {
      const [loops] = await inTurns([process.contender("loops", form, "loopMilliseconds")], planesOf(one.layout).length, turns);
      row.loopMilliseconds = spreadOf(loops!);
    }
    rows.push(row);
  }
  await process.end();
  return rows;
}

const core = keepToOneCore();
const versions = { gcc: gccVersion(), scipy: scipyVersion() };
const host = describeHost(core, versions);
const folder = makeWorkFolder();
const rows: Row[] = [];

if (versions.gcc === undefined) console.log("plain C is skipped: there is no gcc");
else {
  console.log(`${versions.gcc}: gcc ${flags.join(" ")}`);
  for (const [one, loops] of [
    [cases.direct9, "direct"],
    [cases.separable31, "separable"],
  ] as [Case, PlainLoops][])
    rows.push(...(await measureAll(one, (planes) => startPlainC(folder, loops, one.kernel, planes, one.layout.width), formsOf[loops], "C")));
}
if (versions.scipy === undefined) console.log("SciPy is skipped: there is no python3 with scipy");
else {
  console.log(`${versions.scipy}: one thread`);
  for (const one of [cases.fft31, cases.fft127])
    rows.push(...(await measureAll(one, (planes) => startScipy(folder, one.kernel, planes, one.layout.width), scipyForms, "SciPy")));
}

printTable(
  ["case", "yardstick", "median ms", "p25", "p75", "loops alone", "largest difference"],
  rows.map((row) => [
    row.case,
    row.yardstick,
    ...[row.milliseconds.median, row.milliseconds.p25, row.milliseconds.p75].map(digits),
    row.loopMilliseconds === undefined ? "" : digits(row.loopMilliseconds.median),
    row.largestDifference.toExponential(1),
  ]),
);
writeResult("yardsticks", host, { clock: "processor time", flags, turns, rows });
