/**
 * `npm run bench:fused`: what fused multiply–add gains: the builds simd and relaxed-simd in turns. Needs a host with relaxed SIMD, such as
 * Node 22: the command fetches one where the running Node is older.
 */
import { createEngine, type Engine } from "../src/index.js";
import { directFloats, fftFloats, separableFloats } from "./cases.js";
import { EngineContender } from "./engineContender.js";
import { describeHost, keepToOneCore } from "./host.js";
import { timeLoops } from "./loops.js";
import { writeResult } from "./resultFile.js";
import { digits, printTable } from "./table.js";

/** For each case in each build. */
const milliseconds = 1000;

const cases = [
  ...[3, 9, 15].map((taps) => directFloats(taps, 1)),
  directFloats(9, 4),
  ...[9, 31].map((taps) => separableFloats(taps, 1)),
  separableFloats(31, 4),
  fftFloats(63),
];

const host = describeHost(keepToOneCore());
const engines: Engine[] = [await createEngine({ build: "simd" }), await createEngine({ build: "relaxed-simd" })];
const rows: Record<string, unknown>[] = [];
const cells: string[][] = [];

for (const one of cases) {
  const contenders = engines.map((engine) => new EngineContender(engine, one));
  const times = await timeLoops(
    contenders.map((contender, index) => ({ name: engines[index]!.build, run: (turn) => contender.filterPlane(turn) })),
    milliseconds,
  );
  const [plain, fused] = times.map((time) => time.milliseconds) as [(typeof times)[0]["milliseconds"], (typeof times)[0]["milliseconds"]];
  const gain = Number((plain.median / fused.median).toFixed(3));
  rows.push({ case: one.name, simd: plain, relaxed: fused, gain, largestDifferences: contenders.map((contender) => contender.verify()) });
  cells.push([one.name, digits(plain.median), digits(fused.median), gain.toFixed(2)]);
  for (const contender of contenders) contender.filter.dispose();
}

printTable(["case", "simd, median ms", "relaxed-simd", "times as fast"], cells);
writeResult("fused", host, { clock: "wall clock", rows });
