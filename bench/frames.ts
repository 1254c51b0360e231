/**
 * `npm run bench:frames [-- frames]`: frames of 1280×720 RGBA bytes through a prepared filter, in Node and in Chromium: garbage, memory and the
 * spread of times, against a control loop of equal length in turns with them.
 */
import { median } from "simple-statistics";
import { findChromium } from "../.build/chromium.mjs";
import { gaussian } from "../src/index.js";
import type { Case } from "./cases.js";
import { printHistograms, summarise } from "./frames/histogram.js";
import { ways, type FrameHost } from "./frames/frameHost.js";
import { openChromium } from "./frames/inChromium.js";
import { openNode } from "./frames/inNode.js";
import { allocationsDuring, liveHeap, ofTheLibrary } from "./frames/session.js";
import { describeHost, keepToOneCore } from "./host.js";
import { writeResult } from "./resultFile.js";
import { digits } from "./table.js";
import { verify } from "./verify.js";

const frames = Number(process.argv[2] ?? 3000);
const warmFrames = 150;
const work = { width: 1280, height: 720, taps: 9, frames };

/** p99 ÷ median of the frames over the same of the control loop. */
const mostSpread = 1.25;
/** The heap is looked at after each of so many parts of the frames. What the host adds for itself (compiled code, feedback) comes in one of them, what frames leave in all. */
const growthParts = 5;
const framesInPart = Math.ceil(frames / growthParts);
/** Live bytes that may have come in the median part: half of the smallest object, 12 bytes, for each frame. */
const mostGrowth = 6 * framesInPart;

const filtered: Case = {
  name: `separable RGBA bytes ${work.taps} taps, ${work.width}×${work.height}`,
  layout: { width: work.width, height: work.height, channels: 4, sample: "u8" },
  kernel: gaussian({ sigma: work.taps / 6, radius: (work.taps - 1) / 2 }),
  options: { alpha: "none" },
};

/** By how much the live heap grew in each part of the frames. */
async function heapGrowth(host: FrameHost): Promise<number[]> {
  const grown: number[] = [];
  let before = await liveHeap(host.session);
  for (let part = 0; part < growthParts; part++) {
    await host.run(framesInPart);
    const after = await liveHeap(host.session);
    grown.push(after - before);
    before = after;
  }
  return grown;
}

async function measure(host: FrameHost, way: (typeof ways)[number]) {
  const { method, arithmetic } = await host.prepare({ ...work, way });
  // A collection makes the host forget some of what it has compiled: the frames that are sampled come after the last warm-up.
  await host.warmUp(warmFrames);
  const engineBefore = await host.engineBytes();
  await liveHeap(host.session);
  await host.warmUp(warmFrames);
  const allocations = await allocationsDuring(host.session, () => host.run(frames));
  const times = await host.times();
  const heapBytes = await heapGrowth(host);
  const { image, result } = await host.firstResult();
  const largestDifference = verify(filtered, { ...filtered.layout, data: image }, result, 1 / 16);
  const [ours, control] = [summarise(times.frames), summarise(times.control)];
  const spread = Number((ours.p99ToMedian / control.p99ToMedian).toFixed(3));
  const own = allocations.filter(ofTheLibrary);
  const growth = { heapBytes, engineBytes: (await host.engineBytes()) - engineBefore };
  return {
    method,
    arithmetic,
    frames: ours,
    control,
    spread,
    allocationsOfTheLibrary: own,
    allocatedElsewhereBytes: allocations.reduce((sum, { byteLength }) => sum + byteLength, 0) - own.reduce((sum, { byteLength }) => sum + byteLength, 0),
    growth,
    largestDifference,
    passes: { spread: spread <= mostSpread, garbage: own.length === 0, memory: median(heapBytes) <= mostGrowth && growth.engineBytes === 0 },
  };
}

type Measured = Awaited<ReturnType<typeof measure>>;

function print(name: string, { method, arithmetic, frames: ours, control, spread, allocationsOfTheLibrary, growth, passes }: Measured): void {
  const told = (good: boolean): string => (good ? "pass" : "MISS");
  console.log(`\n${name}: ${frames} frames of ${filtered.name} (${method}, ${arithmetic})`);
  console.log(
    `  frames   median ${digits(ours.medianMilliseconds)} ms, p99 ${digits(ours.p99Milliseconds)}, worst ${digits(ours.worstMilliseconds)}, p99 ÷ median ${ours.p99ToMedian.toFixed(3)}`,
  );
  console.log(
    `  control  median ${digits(control.medianMilliseconds)} ms, p99 ${digits(control.p99Milliseconds)}, worst ${digits(control.worstMilliseconds)}, p99 ÷ median ${control.p99ToMedian.toFixed(3)}`,
  );
  console.log(`  spread over the control's ${spread.toFixed(3)}, at most ${mostSpread}: ${told(passes.spread)}`);
  const garbage = allocationsOfTheLibrary.map(({ name: what, byteLength }) => `${what} ${byteLength} bytes`).join(", ");
  console.log(`  sampled allocations of the library: ${garbage || "none"}: ${told(passes.garbage)}`);
  console.log(
    `  growth: ${growth.heapBytes.join(", ")} bytes of heap in ${framesInPart} frames each, ${growth.engineBytes} of engine memory: ${told(passes.memory)}\n`,
  );
  printHistograms(["frames", ours.histogram], ["control", control.histogram]);
}

const core = keepToOneCore();
const executablePath = findChromium();
if (executablePath === undefined) console.log("Chromium is skipped: none was found");
const openers = [openNode, ...(executablePath === undefined ? [] : [() => openChromium(executablePath)])];
for (const open of openers) {
  const place = await open();
  const host = describeHost(core, place.name.startsWith("Chromium") ? { chromium: place.name.split(" ")[1] } : {});
  const measuredWays: Partial<Record<(typeof ways)[number], Measured>> = {};
  for (const way of ways) {
    const measured = (measuredWays[way] = await measure(place, way));
    print(`${place.name}, ${way}`, measured);
    if (!Object.values(measured.passes).every(Boolean)) process.exitCode = 1;
  }
  await place.close();
  writeResult("frames", host, { clock: "wall clock", count: frames, work: filtered.name, ways: measuredWays }, place.name);
}
