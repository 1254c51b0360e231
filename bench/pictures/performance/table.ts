import type { ContestResult, Mean } from "../../contest.js";
import type { YardsticksFile } from "./results.js";

const times = (ratio: number): string => `${ratio.toFixed(2)} ×`;

const range = (contests: readonly ContestResult[]): string => {
  const ratios = contests.map(({ ratio }) => ratio);
  const [low, high] = [Math.min(...ratios), Math.max(...ratios)];
  return low === high ? times(low) : `${low.toFixed(2)} … ${times(high)}`;
};

const limit = (contests: readonly ContestResult[], mean?: Mean): string => {
  const bars = { mean: mean?.bar ?? null, each: contests[0]!.bar };
  return Object.entries(bars)
    .flatMap(([name, bar]) => (bar === null ? [] : [`${name} ${bar}`]))
    .join(", ");
};

/** Groups of contests that one line of the README tells: by what they were held against. */
const lines: { group: string; words: string; of(contest: ContestResult): boolean; mean?: RegExp }[] = [
  { group: "direct", words: "direct, floats, 3×3 … 15×15, 1 and 4 channels; C in its best of several register blockings", of: () => true, mean: /C blocks/ },
  { group: "separable", words: "separable, floats, 9 … 63 taps, 1 and 4 channels; C in its best blocking", of: () => true, mean: /C blocks/ },
  { group: "transforms", words: "complex transforms by columns; FFTW by columns", of: ({ work }) => work.endsWith("columns"), mean: /by columns/ },
  { group: "transforms", words: "complex transforms by columns; FFTW in its faster layout", of: ({ work }) => work.endsWith("layout"), mean: /faster layout/ },
  { group: "fft", words: "FFT, one plane of floats, 15×15 … 255×255; SciPy's best", of: ({ work }) => work.endsWith(": SciPy"), mean: /SciPy/ },
  { group: "fft", words: "the same; overlap-save in C over FFTW with its best tile", of: ({ work }) => work.endsWith(": overlap-save"), mean: /FFTW/ },
  { group: "fft", words: "FFT, RGBA bytes, 31×31 and 127×127; SciPy by planes, conversion included", of: ({ work }) => work.endsWith("included") },
  { group: "bytes", words: "RGBA bytes, direct, separable, box; own path through floats", of: ({ work }) => work.endsWith("own f32 path") },
  { group: "bytes", words: "the same; the same fixed-point method in C", of: ({ work }) => !work.endsWith("own f32 path") },
  { group: "box", words: "box of 101 taps; box of 9 taps", of: ({ work }) => work.includes("against box") },
  { group: "box", words: "box of RGBA bytes; `TypedArray.set` of the image", of: ({ work }) => work.includes("copy") },
  { group: "small", words: "16×16 … 256×256, prepared; three times their samples at the rate of 1080p and 5 µs", of: () => true },
  { group: "large", words: "48 megapixels; 2 megapixels, time a sample", of: () => true },
  { group: "replace", words: "`replaceKernel`; 0.3 ms, for the FFT one kernel transform more", of: () => true },
];

/** The README's table: what was timed, against what, and the ratio of the times. */
export function markdownTable(path: string, { groups }: YardsticksFile): string {
  const rows = lines.flatMap(({ group, words, of, mean: named }) => {
    const measured = groups[group];
    const contests = measured?.contests.filter(of) ?? [];
    if (!measured || contests.length === 0) return [];
    const mean = named && measured.means.find(({ name }) => named.test(name));
    return [`| ${words.replace("; ", " | ")} | ${mean ? times(mean.ratio) : ""} | ${range(contests)} | ${limit(contests, mean)} | [${group}](${path}) |`];
  });
  return ["| ours | held against | geometric mean | from … to | at most | group in the file |", "|---|---|---|---|---|---|", ...rows].join("\n");
}
