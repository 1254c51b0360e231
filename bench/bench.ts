/** `npm run bench [-- part of a name]`: how long each named case takes, prepared, in each build. */
import { Bench } from "tinybench";
import { createEngine, type Build } from "../src/index.js";
import { cases } from "./cases.js";
import { EngineContender } from "./engineContender.js";
import { describeHost, keepToOneCore } from "./host.js";
import { writeResult } from "./resultFile.js";
import { spreadOf, type Spread } from "./spread.js";
import { digits, printTable } from "./table.js";

const builds: readonly Build[] = ["simd", "scalar"];
const wanted = process.argv[2] ?? "";
const chosen = Object.values(cases).filter(({ name }) => name.toLowerCase().includes(wanted.toLowerCase()));
if (chosen.length === 0)
  throw new Error(
    `no case has "${wanted}" in its name: ${Object.values(cases)
      .map(({ name }) => name)
      .join("; ")}`,
  );

const host = describeHost(keepToOneCore());
const rows: { case: string; build: Build; milliseconds: Spread; predicted: number; largestDifference: number }[] = [];

for (const build of builds) {
  const engine = await createEngine({ build });
  const bench = new Bench({ name: build, time: 400, iterations: 11, warmupTime: 100, warmupIterations: 3, retainSamples: true });
  const contenders = chosen.map((one) => new EngineContender(engine, one));
  for (const contender of contenders) {
    let turn = 0;
    bench.add(contender.name, () => contender.filterPlane(turn++));
  }
  await bench.run();
  for (const [index, contender] of contenders.entries()) {
    const { result } = bench.tasks[index]!;
    if (result.state !== "completed") throw new Error(`${contender.name} did not complete: ${result.state}`);
    const predicted = contender.filter.explanation.milliseconds;
    rows.push({ case: contender.name, build, milliseconds: spreadOf(result.latency.samples!), predicted, largestDifference: contender.verify() });
    contender.filter.dispose();
  }
  engine.dispose();
}

printTable(
  ["case", "build", "median ms", "p25", "p75", "runs", "predicted", "largest difference"],
  rows.map(({ case: name, build, milliseconds, predicted, largestDifference }) => [
    name,
    build,
    ...[milliseconds.median, milliseconds.p25, milliseconds.p75].map(digits),
    String(milliseconds.samples),
    digits(predicted),
    largestDifference.toExponential(1),
  ]),
);
if (wanted === "") writeResult("cases", host, { clock: "wall clock", rows });
