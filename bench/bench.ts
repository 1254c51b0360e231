/** `npm run bench [-- part of a name]`: how long each named case takes, prepared, in each build. */
import { createEngine, type Build } from "../src/index.js";
import { cases, samplesOf } from "./cases.js";
import { measureCurve } from "./curve.js";
import { EngineContender } from "./engineContender.js";
import { describeHost, keepToOneCore } from "./host.js";
import { timeLoops, warnOfSaturation } from "./loops.js";
import { writeResult } from "./resultFile.js";
import type { Spread } from "./spread.js";
import { digits, printTable } from "./table.js";

const builds: readonly Build[] = ["simd", "scalar"];
/** For each case in each build: rounds, with their warm-up, and the verification make half as much again of it. */
const milliseconds = 1200;

const wanted = process.argv[2] ?? "";
const chosen = Object.values(cases).filter(({ name }) => name.toLowerCase().includes(wanted.toLowerCase()));
if (chosen.length === 0)
  throw new Error(
    `no case has "${wanted}" in its name: ${Object.values(cases)
      .map(({ name }) => name)
      .join("; ")}`,
  );

const host = describeHost(keepToOneCore());
const rows: { case: string; build: Build; milliseconds: Spread; nanosecondsPerSample: number; predicted: number; bytes: number; largestDifference: number }[] =
  [];

for (const build of builds) {
  const engine = await createEngine({ build });
  const contenders = chosen.map((one) => new EngineContender(engine, one));
  const times = await timeLoops(
    contenders.map((contender) => ({ name: contender.name, run: (turn) => contender.filterPlane(turn) })),
    milliseconds,
  );
  warnOfSaturation(times);
  for (const [index, contender] of contenders.entries()) {
    const spread = times[index]!.milliseconds;
    const { milliseconds: predicted, bytes } = contender.filter.explanation;
    const nanosecondsPerSample = Number(((1e6 * spread.median) / samplesOf(contender.case)).toPrecision(4));
    rows.push({ case: contender.name, build, milliseconds: spread, nanosecondsPerSample, predicted, bytes, largestDifference: contender.verify() });
    contender.filter.dispose();
  }
  engine.dispose();
}

printTable(
  ["case", "build", "median ms", "p25", "p75", "runs", "ns a sample", "predicted ms", "MiB", "largest difference"],
  rows.map(({ case: name, build, milliseconds: { median, p25, p75, samples }, nanosecondsPerSample, predicted, bytes, largestDifference }) => [
    name,
    build,
    ...[median, p25, p75].map(digits),
    String(samples),
    digits(nanosecondsPerSample),
    digits(predicted),
    digits(bytes / 2 ** 20),
    largestDifference.toExponential(1),
  ]),
);
if (wanted === "") {
  const engine = await createEngine({ build: "simd" });
  const curve = await measureCurve(engine);
  engine.dispose();
  console.log();
  printTable(
    ["one f32 plane, 1080p", "taps", "median ms"],
    curve.map(({ method, taps, milliseconds: { median } }) => [method, `${taps}×${taps}`, digits(median)]),
  );
  writeResult("cases", host, { clock: "processor time", rows, curve });
}
