/** `npm run bench:cold [-- starts]`: from the import of the built package to the first result, in fresh Node processes and fresh pages, part by part. */
import { findChromium } from "../.build/chromium.mjs";
import { partNames, samplesOfStarts, type ColdStart, type Part, type SampleOfStart } from "./coldStart/coldStart.js";
import { openChromium } from "./coldStart/inChromium.js";
import { startInNode } from "./coldStart/inNode.js";
import { describeHost, keepToOneCore } from "./host.js";
import { writeResult } from "./resultFile.js";
import { spreadOf, type Spread } from "./spread.js";
import { digits, printTable } from "./table.js";

/** A first run may take this many times as long as the tenth. */
const mostTimesTheTenth = 3;

const fewest = 10;
const starts = Number(process.argv[2] ?? 20);
if (!Number.isInteger(starts) || starts < fewest) throw new Error(`The number of starts is ${process.argv[2]}; at least ${fewest} are needed for a median.`);

const core = keepToOneCore();
const executablePath = findChromium();
const browser = executablePath === undefined ? undefined : await openChromium(executablePath);
const host = describeHost(core, { chromium: browser?.version });
const hosts: Record<string, (sample: SampleOfStart) => ColdStart | Promise<ColdStart>> = {
  [`Node ${process.versions.node}`]: startInNode,
  ...(browser === undefined ? {} : { [`Chromium ${browser.version}`]: (sample: SampleOfStart) => browser.start(sample) }),
};

const kinds = Object.keys(hosts).flatMap((where) => samplesOfStarts.map((sample) => ({ where, sample, measured: [] as ColdStart[] })));
for (let round = 0; round < starts; round++) for (const { where, sample, measured } of kinds) measured.push(await hosts[where]!(sample));
await browser?.close();

/** A result is wrong where it is off by more than a level of bytes, or by more than single precision explains. */
const allowed: Record<SampleOfStart, number> = { u8: 0.57 / 255, f32: 1e-6 };

const rows = kinds.map(({ where, sample, measured }) => {
  const worst = Math.max(...measured.map(({ difference }) => difference));
  if (!(worst <= allowed[sample])) throw new Error(`${where}, ${sample}: a first result is off by ${worst} of the full value.`);
  const milliseconds = Object.fromEntries((Object.keys(partNames) as Part[]).map((part) => [part, spreadOf(measured.map((one) => one[part]))])) as Record<
    Part,
    Spread
  >;
  const ratio = Number(spreadOf(measured.map(({ firstRun, tenthRun }) => firstRun / tenthRun)).median.toFixed(2));
  return { where, sample, method: measured[0]!.method, milliseconds, firstToTenth: ratio, withinLimit: ratio <= mostTimesTheTenth };
});

printTable(
  ["512×512, 5×5, median ms", ...rows.map(({ where, sample }) => `${where} ${sample}`)],
  [
    ...(Object.keys(partNames) as Part[]).map((part) => [`${part}: ${partNames[part]}`, ...rows.map(({ milliseconds }) => digits(milliseconds[part].median))]),
    ["first run ÷ tenth", ...rows.map(({ firstToTenth }) => firstToTenth.toFixed(2))],
  ],
);
writeResult("cold-start", host, { clock: "wall clock", image: "512×512, u8 with 4 channels, f32 with 1", kernel: "5×5", starts, mostTimesTheTenth, rows });
if (rows.some(({ withinLimit }) => !withinLimit)) process.exitCode = 1;
