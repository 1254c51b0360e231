import { describe, expect, test } from "vitest";
import type { Crossing, Crossover } from "../../src/measure/types.js";
import { answerSentence, machineSentence, otherCrossingSentences, regretSentence, subjectSentence } from "../../src/report/sentences.js";
import { sampleCrossover } from "./samples.js";

const leading = (from: Crossing["from"], to: Crossing["to"], size: number, interval: [number, number]): Crossing => ({
  from,
  to,
  size,
  interval,
  leading: true,
});

function withCrossings(...crossings: Crossing[]): Crossover {
  return { ...sampleCrossover(), crossings };
}

describe("the answer in one sentence", () => {
  test.each<[string, Crossover, string]>([
    ["nothing measured", sampleCrossover({ sizes: [] }), "No kernel size has been measured yet."],
    ["one size", sampleCrossover({ sizes: [9] }), "On this device separable passes are fastest at 9×9 taps, the only size measured."],
    ["one method", sampleCrossover({ methods: ["fft"] }), "Only the FFT could be timed, so there is nothing to compare."],
    ["one throughout", sampleCrossover({ sizes: [3, 5] }), "On this device direct sums are fastest at every size measured, from 3×3 to 5×5 taps."],
    [
      "the FFT overtakes",
      withCrossings(leading("direct", "fft", 9.3, [7, 11])),
      "From about 9×9 taps on, the FFT is faster than direct sums on this device; the change lies between 7×7 and 11×11.",
    ],
    [
      "two changes, given in any order",
      withCrossings(leading("separable", "fft", 50.6, [45, 63]), leading("direct", "separable", 5.2, [4.5, 6.2])),
      "On this device direct sums are fastest up to about 5×5 taps, separable passes from there to about 51×51 and the FFT for larger kernels; " +
        "the changes lie between 4×4 and 7×7 and between 45×45 and 63×63.",
    ],
    [
      "a size known exactly",
      withCrossings(leading("separable", "fft", 51, [51, 51])),
      "From about 51×51 taps on, the FFT is faster than separable passes on this device.",
    ],
    [
      "two changes, and what lies between them is noise",
      withCrossings(leading("direct", "separable", 5.2, [5, 7]), leading("running-sum", "fft", 50.6, [45, 63])),
      "On this device separable passes are faster than direct sums from about 5×5 taps on and the FFT is faster than running sums from about 51×51 taps on; " +
        "the changes lie between 5×5 and 7×7 and between 45×45 and 63×63.",
    ],
    [
      "the last change was not found in time",
      withCrossings(leading("direct", "separable", 5.2, [5, 7])),
      "From about 5×5 taps on, separable passes are faster than direct sums on this device, and the FFT is fastest at 127×127, from a size on that the time did not suffice to find; the change lies between 5×5 and 7×7.",
    ],
    [
      "the fastest changes, and noise hides where",
      { ...sampleCrossover(), crossings: [] },
      "On this device direct sums, separable passes and the FFT are fastest in turn from 3×3 to 127×127 taps; where they change places, they are nearer than the noise.",
    ],
  ])("%s", (_, crossover, sentence) => {
    expect(answerSentence(crossover)).toBe(sentence);
  });

  test("a crossing that no fastest line takes part in is no answer, and is told beside it", () => {
    const crossover = withCrossings({ ...leading("direct", "fft", 13.9, [11, 15]), leading: false });
    expect(answerSentence(crossover)).not.toContain("14×14");
    expect(otherCrossingSentences(crossover)).toEqual([
      "The FFT overtakes direct sums at about 14×14 taps (between 11×11 and 15×15), where another method is faster than both.",
    ]);
    expect(otherCrossingSentences(withCrossings(leading("direct", "fft", 9.3, [7, 11])))).toEqual([]);
  });
});

describe("what a wrong choice costs", () => {
  const withRegrets = (...regrets: number[]): Crossover => {
    const { rows, ...others } = sampleCrossover();
    return { ...others, rows: rows.slice(0, regrets.length).map((row, k) => ({ ...row, regret: regrets[k]! })) };
  };

  test.each<[number[], string]>([
    [[], "There are not two methods to compare yet."],
    [[0], "The engine would have chosen the fastest method at the one size, or one that is as fast within the noise."],
    [[0, 0], "The engine would have chosen the fastest method at both sizes, or one that is as fast within the noise."],
    [[0, 0, 0], "The engine would have chosen the fastest method at all 3 sizes, or one that is as fast within the noise."],
    [
      [0, 0.034, 0],
      "The engine would have chosen the fastest method, or one as fast within the noise, at 2 of 3 sizes. At the other it would have taken 3.4 % longer than with the fastest (5×5).",
    ],
    [
      [0.1, 0.034, 0.25],
      "The engine would have chosen the fastest method, or one as fast within the noise, at 0 of 3 sizes. At the others it would have taken up to 25 % longer than with the fastest (at 7×7).",
    ],
  ])("regrets of %j", (regrets, sentence) => {
    expect(regretSentence(withRegrets(...regrets))).toBe(sentence);
  });
});

describe("what was measured, and where", () => {
  test("images, kernels and border in words", () => {
    expect(subjectSentence(sampleCrossover())).toBe(
      "Measured with images of Full HD (1920×1080), one channel of bytes, and separable kernels (bells); border replicate.",
    );
  });

  test.each<[Partial<Crossover>, string]>([
    [{ layout: { width: 4000, height: 3000, channels: 4, sample: "f32" } }, "4000×3000 (12 megapixels), four channels (RGBA) of floats"],
    [{ layout: { width: 64, height: 48, channels: 2, sample: "u16" } }, "64×48, two channels (grey and alpha) of 16-bit samples"],
    [{ separable: false }, "kernels without structure"],
    [{ border: { constant: 255 } }, "border constant 255."],
    [{ border: { rows: "periodic" } }, "border rows periodic, columns replicate."],
  ])("%j", (change, words) => {
    expect(subjectSentence({ ...sampleCrossover(), ...change })).toContain(words);
  });

  test("machine, build, threads, date and profile", () => {
    expect(machineSentence({ ...sampleCrossover(), threads: 4 })).toBe(
      "Measured on made-up processor, no runtime, simd build, 4 threads, on 1 December 2026, 14:05 UTC; predicted by the profile “made-up profile”.",
    );
    expect(machineSentence({ ...sampleCrossover(), date: "2026-02-03" })).toContain("one thread, on 3 February 2026;");
    expect(machineSentence({ ...sampleCrossover(), date: "yesterday" })).toContain("on yesterday;");
  });
});
