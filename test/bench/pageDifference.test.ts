import { describe, expect, test } from "vitest";
import { differenceInWords } from "../../bench/page/client/difference.js";
import type { Crossing, Crossover, CrossoverRow } from "../../src/measure/index.js";

type Times = Record<number, Partial<Record<"direct" | "fft" | "separable", number>>>;

/** Made up: medians by size, the middle half of the times within two per cent of them. */
function madeUp(times: Times, change: Partial<Crossover> = {}): Crossover {
  const rows = Object.entries(times).map(([size, milliseconds]): CrossoverRow => {
    const quartiles = Object.fromEntries(Object.entries(milliseconds).map(([method, time]) => [method, [0.99 * time, 1.01 * time]]));
    return { size: Number(size), milliseconds, quartiles, samples: 9, predicted: {}, chosen: "fft", fastest: "fft", regret: 0 };
  });
  return {
    layout: { width: 1920, height: 1080, channels: 4, sample: "u8" },
    border: "replicate",
    separable: true,
    rows,
    crossings: [],
    notes: [],
    host: "made-up device",
    build: "simd",
    threads: 1,
    profile: "",
    date: "2026-12-01T10:00:00Z",
    ...change,
  };
}

const crossing = (size: number, interval: [number, number], change: Partial<Crossing> = {}): Crossing => ({
  from: "direct",
  to: "fft",
  size,
  interval,
  leading: true,
  ...change,
});
const then = "on 1 December 2026, 10:00 UTC";

describe("what differs from earlier results", () => {
  test("methods that fare alike are named together, others apart", () => {
    const now = madeUp({ 3: { direct: 1, separable: 1, fft: 10 }, 9: { direct: 9, separable: 2, fft: 10 } });
    const before = madeUp({ 3: { direct: 2, separable: 2, fft: 10 }, 9: { direct: 18, separable: 4, fft: 10 } });
    expect(differenceInWords(now, before)).toBe(`Direct sums and separable passes are 2.0 times as fast and the FFT is as fast as ${then}.`);
    expect(differenceInWords(before, now)).toBe(`Direct sums and separable passes are 2.0 times as slow and the FFT is as fast as ${then}.`);
  });

  test("a difference within the middle half of the times is none, however large it looks", () => {
    const now = madeUp({ 3: { fft: 10 } });
    const before = madeUp({ 3: { fft: 13 } });
    expect(differenceInWords(now, before)).toContain("The FFT is 1.30 times as fast");
    before.rows[0]!.quartiles = { fft: [10, 15] };
    expect(differenceInWords(now, before)).toBe(`The FFT is as fast as ${then}.`);
  });

  test("other sizes are read from the straight line between two of them, where both axes are logarithmic", () => {
    // 3 → 1 ms and 27 → 81 ms is the power 2 of size / 3: 9 ms at 9.
    const now = madeUp({ 9: { direct: 3 } });
    const before = madeUp({ 3: { direct: 1 }, 27: { direct: 81 } });
    expect(differenceInWords(now, before)).toContain("Direct sums are 3.0 times as fast");
  });

  test("nothing is read beyond the sizes that were measured", () => {
    expect(differenceInWords(madeUp({ 9: { direct: 3 } }), madeUp({ 3: { direct: 1 }, 7: { direct: 3 } }))).toContain("the speeds cannot be compared");
    expect(differenceInWords(madeUp({ 9: { direct: 3 } }), madeUp({ 9: { fft: 3 } }))).toContain("the speeds cannot be compared");
  });

  const same: Times = { 3: { direct: 1, fft: 10 } };

  test.each([
    ["moves", [crossing(21, [19, 23])], [crossing(33, [31, 35])], "The lead changes at 21×21 taps instead of 33×33."],
    ["stays within the intervals", [crossing(21, [15, 25])], [crossing(24, [23, 31])], "The lead changes at the same size, within what can be told."],
    ["is new", [crossing(21, [19, 23])], [], "Now the FFT takes the lead at 21×21 taps; then no other method did."],
    ["is gone", [], [crossing(21, [19, 23])], "Then the FFT took the lead at 21×21 taps; now no other method does."],
    ["is another", [crossing(21, [19, 23])], [crossing(11, [9, 13], { from: "separable" })], "from separable passes to the FFT at 11×11 taps"],
    ["does not lead", [crossing(21, [19, 23], { leading: false })], [], `as fast as ${then}.`],
  ] as const)("a crossing that %s", (_, mine, other, words) => {
    expect(differenceInWords(madeUp(same, { crossings: [...mine] }), madeUp(same, { crossings: [...other] }))).toContain(words);
  });

  test("another device, layout or number of threads is named", () => {
    const before = madeUp(same, { host: "old phone", threads: 2, layout: { width: 200, height: 100, channels: 1, sample: "u16" } });
    expect(differenceInWords(madeUp(same), before)).toBe(
      "The earlier results are for something else, so read this with care: Picture, 200 × 100, shades of grey, 16-bit numbers, bells. " +
        "They were measured with 2 threads, these with 1. Every method is as fast as on old phone, 1 December 2026, 10:00 UTC.",
    );
  });
});
