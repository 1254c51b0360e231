/** `npm run bench:crossover`: where methods cross on this machine, for one and four channels of bytes and floats, by a profile measured here. */
import { createEngine, type Channels, type SampleType } from "../src/index.js";
import { measureCrossover, measureProfile, type Crossover } from "../src/measure/index.js";
import { answerSentence, otherCrossingSentences } from "../src/report/sentences.js";
import { describeHost, keepToOneCore } from "./host.js";
import { writeResult } from "./resultFile.js";

const forms: readonly [Channels, SampleType][] = [
  [1, "u8"],
  [4, "u8"],
  [1, "f32"],
  [4, "f32"],
];

const size = { width: 1280, height: 720 };
/** Of one table. */
const milliseconds = Number(process.argv[2] ?? 8000);

const host = describeHost(keepToOneCore());
const engine = await createEngine();
const profile = await measureProfile(engine);
engine.dispose();
const fitted = await createEngine({ profile });
const tables: Crossover[] = [];
for (const [channels, sample] of forms) {
  for (const separable of [true, false]) {
    const table = await measureCrossover(fitted, { ...size, channels, sample, separable, milliseconds });
    tables.push(table);
    console.log(`\n${channels} × ${sample}, ${separable ? "bells" : "kernels without structure"}`);
    for (const sentence of [answerSentence(table), ...otherCrossingSentences(table)]) console.log(`  ${sentence}`);
    for (const { from, to, size: taps, interval } of table.crossings) console.log(`  ${from} → ${to}: ${taps} (${interval.join(" … ")})`);
  }
}
fitted.dispose();
writeResult("crossover", host, { size, milliseconds, profile, tables });
