/** Two threads against two processes, in turns: how much of what the machine gives do threads take, copies included? */
import { createEngine } from "../src/index.js";
import { nodeWorker } from "../test/support/nodeWorkers.js";
import { describeHost } from "./host.js";
import { writeResult } from "./resultFile.js";
import { digits, printTable } from "./table.js";
import { contest, type ThreadOutcome } from "./threads/contest.js";
import { handOverPrices } from "./threads/handOver.js";
import { least, threadCases, type ThreadCase } from "./threads/threadCases.js";

const single = await createEngine();
const double = await createEngine({ threads: 2, createWorker: nodeWorker });
if (double.threads !== 2) throw new Error("The second thread did not start.");
const names = Object.keys(threadCases) as ThreadCase[];
const outcomes: ThreadOutcome[] = [];
for (const name of names) outcomes.push(await contest(name, single, double));
const prices = await handOverPrices(single, nodeWorker);

printTable(
  ["work", "1 thread, ms", "2 threads, ms", "× as fast", "2 processes", "share", "at least"],
  outcomes.map((one, index) => [
    one.case,
    ...[one.alone.median, one.threads.median, one.threadScaling, one.processScaling, one.share].map(digits),
    least[names[index]!] === undefined ? "" : digits(least[names[index]!]!),
  ]),
);
console.log(`\nhanding over: ${digits(prices.microseconds)} µs (${digits(prices.afterIdle)} µs after 20 ms of rest)`);
writeResult("threads", describeHost("not pinned"), { outcomes, handOver: prices });
single.dispose();
double.dispose();
process.exitCode = outcomes.some(({ share }, index) => share < (least[names[index]!] ?? 0)) ? 1 : 0;
