/** A process of its own that does a case's work again and again while it is told to, and then says how long each run took. */
import { createEngine } from "../../src/index.js";
import { planesOf } from "../inputs.js";
import { threadCases, type ThreadCase } from "./threadCases.js";

const one = threadCases[process.argv[2] as ThreadCase];
const engine = await createEngine();
const planes = planesOf(one.layout);
const filter = engine.prepare(one.kernel, one.layout, one.options);
const target = filter.run(planes[0]!);
let working = false;

async function work(): Promise<void> {
  const milliseconds: number[] = [];
  for (let run = 0; working; run += 1) {
    const begun = performance.now();
    filter.run(planes[run % planes.length]!, target);
    milliseconds.push(performance.now() - begun);
    if (run === 0) process.send!("working");
    await new Promise((resolve) => setImmediate(resolve));
  }
  // The first run began and the last one ended while the other process was not at work.
  process.send!(milliseconds.slice(1, -1));
}

process.on("message", (message) => {
  working = message === "work";
  if (working) void work();
});
process.on("disconnect", () => process.exit());
for (let run = 0; run < 10; run += 1) filter.run(planes[0]!, target);
process.send!("ready");
