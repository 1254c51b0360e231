/** `npm run pictures:performance`: the README's chart of time against kernel size, and its table of ratios, from the newest result files. */
import { readFileSync, writeFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { drawChart, type Yardstick } from "./performance/chart.js";
import { newest, type CasesFile, type YardsticksFile } from "./performance/results.js";
import { markdownTable } from "./performance/table.js";

const picture = "bench/pictures/performance.svg";
const root = new URL("../../", import.meta.url);
const [begin, end] = ["<!-- performance: begin -->", "<!-- performance: end -->"];

const cases = newest<CasesFile>("cases");
const yardsticks = newest<YardsticksFile>("yardsticks");

/** One-channel contests, by the size that their name tells. */
function yardsticksOf(group: string, method: string): Yardstick[] {
  const contests = yardsticks.content.groups[group]?.contests ?? [];
  return contests.flatMap(({ work, rivals }) => {
    const taps = / f32 (\d+)/.exec(work)?.[1];
    if (taps === undefined || work.includes("4 channels")) return [];
    const best = rivals[0]!;
    const maker = best.name.startsWith("SciPy") ? "SciPy" : best.name.startsWith("FFTW") ? "FFTW" : "C";
    return [{ maker, method, taps: Number(taps), milliseconds: best.milliseconds.median } as const];
  });
}

const { host } = cases.content;
const marks = [...yardsticksOf("direct", "direct"), ...yardsticksOf("separable", "separable"), ...yardsticksOf("fft", "fft")];
const caption = `${host.processor}, one core, Node ${host.versions["node"]}, ${host.date.slice(0, 10)}; medians`;
writeFileSync(new URL(picture, root), `${drawChart(cases.content.curve, marks, caption)}\n`);
console.log(`${picture}, from ${cases.path} and ${yardsticks.path}`);

const part = [
  begin,
  `![time against kernel size, one line a method](${picture})`,
  "",
  `Lines: [${cases.path.split("/").at(-1)}](${cases.path}); marks and table: [${yardsticks.path.split("/").at(-1)}](${yardsticks.path}).`,
  "",
  markdownTable(yardsticks.path, yardsticks.content),
  end,
].join("\n");

const readme = fileURLToPath(new URL("README.md", root));
const text = readFileSync(readme, "utf8");
const [from, to] = [text.indexOf(begin), text.indexOf(end)];
if (from < 0 || to < from) console.log(`README.md has no ${begin} … ${end}; between them would stand:\n\n${part}`);
else writeFileSync(readme, text.slice(0, from) + part + text.slice(to + end.length));
