/** Runs 100,000 filters into one target in a process with --expose-gc, and prints by how many bytes the heap has grown. */
import { createEngine, type Method } from "../../src/index.js";
import { kernelFor } from "./methodKernels.js";
import { noiseImage } from "../support/noise.js";

const collect = (globalThis as { gc?: () => void }).gc!;

/** The heap in use once garbage is gone; the collector takes more than one round for what finalizers hold. */
function heapAfterCollection(): number {
  for (let rounds = 0; rounds < 4; rounds++) collect();
  return process.memoryUsage().heapUsed + process.memoryUsage().arrayBuffers;
}

const method = process.argv[2] as Method;
const image = noiseImage("u8", 64, 64, 1, 1);
const target = { data: new Uint8Array(64 * 64), width: 64, height: 64, channels: 1 as const };
const engine = await createEngine();
const filter = engine.prepare(kernelFor[method], { width: 64, height: 64, channels: 1, sample: "u8" }, { method });
for (let times = 0; times < 5000; times++) filter.run(image, target);
const before = heapAfterCollection();
for (let times = 0; times < 100_000; times++) filter.run(image, target);
console.log(heapAfterCollection() - before);
