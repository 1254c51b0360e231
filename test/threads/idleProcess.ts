/** Runs a filter on two threads and leaves the engine alone: nothing must keep the process. */
import { createEngine, gaussian } from "../../src/index.js";
import { nodeWorker } from "../support/nodeWorkers.js";
import { eagerProfile } from "./eagerProfile.js";

const engine = await createEngine({ build: "simd", threads: 2, createWorker: nodeWorker, profile: eagerProfile("simd") });
const layout = { width: 90, height: 120, channels: 1 } as const;
const filter = engine.prepare(gaussian({ sigma: 2 }), layout, { method: "separable" });
const image = { data: new Uint8Array(90 * 120).fill(9), ...layout };
filter.run(image);
await filter.runAsync(image);
console.log(`${filter.explanation.threads} threads`);
if (process.argv[2] === "disposed") engine.dispose();
