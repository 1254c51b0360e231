import { describe, expect, test } from "vitest";
import { directFloats } from "../../bench/cases.js";
import { fastest, type Contender } from "../../bench/contender.js";
import { hold, meanOf, turns } from "../../bench/contest.js";
import { summarise } from "../../bench/frames/histogram.js";
import { markdownTable } from "../../bench/pictures/performance/table.js";
import { tilesWorthTrying } from "../../bench/yardsticks/overlapSave.js";
import { vectorWidths } from "../../bench/yardsticks/transforms.js";

/** Takes what it is told to take, and counts its runs. */
function scripted(name: string, milliseconds: number, further: Partial<Contender> = {}): Contender & { runs: number } {
  const contender = {
    name,
    runs: 0,
    run() {
      contender.runs += 1;
      return milliseconds;
    },
    ...further,
  };
  return contender;
}

describe("a contest", () => {
  test("the fastest rival counts, the others come after it, and the ratio is that of medians", async () => {
    const result = await hold({ work: "w", subject: scripted("ours", 60), rivals: [scripted("slow", 100), scripted("quick", 50)], bar: 1.15 });
    expect([result.ratio, result.verdict]).toEqual([1.2, "MISS"]);
    expect(result.rivals.map(({ name }) => name)).toEqual(["quick", "slow"]);
    expect(result.subject.milliseconds).toMatchObject({ median: 60, samples: turns });
  });

  test("a weight compares unlike amounts of work, and a line without a bar is for information", async () => {
    const { ratio, verdict } = await hold({ work: "w", subject: scripted("ours", 60), rivals: [scripted("other", 100)], weight: 0.5 });
    expect([ratio, verdict]).toEqual([1.2, "for information"]);
  });

  test("only the shortlist is measured to the end", async () => {
    const rivals = [90, 70, 80, 60].map((milliseconds) => scripted(`${milliseconds}`, milliseconds));
    const chosen = await fastest(rivals, 3, 2);
    expect(chosen.map(({ name }) => name)).toEqual(["60", "70"]);
    const { rivals: measured } = await hold({ work: "w", subject: scripted("ours", 1), rivals, shortlist: 1 });
    expect(measured.map(({ name }) => name)).toEqual(["60"]);
  });

  test("a side whose result is wrong ends the contest", async () => {
    const wrong = scripted("wrong", 60, {
      verify() {
        throw new Error("off by 3");
      },
    });
    await expect(hold({ work: "w", subject: scripted("ours", 60), rivals: [wrong] })).rejects.toThrow("off by 3");
  });

  test("means are geometric", async () => {
    const contests = [
      await hold({ work: "a", subject: scripted("ours", 120), rivals: [scripted("r", 60)] }),
      await hold({ work: "b", subject: scripted("ours", 60), rivals: [scripted("r", 120)] }),
    ];
    expect(meanOf("mean", contests, 1)).toEqual({ name: "mean", ratio: 1, bar: 1, verdict: "pass" });
  });

  test("a line of the README's table tells mean, range and bars", async () => {
    const contests = [await hold({ work: "direct", subject: scripted("ours", 120), rivals: [scripted("r", 60)], bar: 1.15 })];
    const host = { processor: "P", core: "1", versions: {}, commit: "", changed: false, date: "" };
    const groups = { direct: { title: "t", host, contests, means: [meanOf("geometric mean, C blocks", contests, 1.05)] } };
    expect(markdownTable("file.json", { host, groups })).toContain(
      "| C in its best of several register blockings | 2.00 × | 2.00 × | mean 1.05, each 1.15 | [direct](file.json) |",
    );
  });
});

test("times of frames are summed up around their median", () => {
  const { medianMilliseconds, p99ToMedian, worstMilliseconds, histogram } = summarise([...Array.from({ length: 99 }, () => 10), 30]);
  expect([medianMilliseconds, worstMilliseconds]).toEqual([10, 30]);
  expect(p99ToMedian).toBeGreaterThanOrEqual(1);
  expect(histogram.counts.reduce((sum, count) => sum + count, 0)).toBe(100);
  expect(histogram.counts.at(-1)).toBe(1);
});

test("the widths of FFTW's vectors are read off its codelets", () => {
  expect(vectorWidths("(dft-ct-dit/8 (dftw-direct-8/112 t2fv_8_avx ) (dft-direct-64-x8 n2fv_64_avx2_128 ))")).toEqual(["avx (256 bit)", "avx2_128 (128 bit)"]);
  expect(vectorWidths("(dft-direct-64 n1_64)")).toEqual(["scalar"]);
});

test("tiles that are tried for an overlap-save are larger than the kernel", () => {
  const tiles = tilesWorthTrying(directFloats(127, 1)).map((tile) => tile.split("x").map(Number));
  expect(tiles.length).toBeGreaterThan(3);
  expect(Math.min(...tiles.flat())).toBeGreaterThan(127);
});
