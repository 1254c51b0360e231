import { describe, expect, test } from "vitest";
import { binomial, kernel } from "../../src/kernels/index.js";
import type { Channels, Raster, SampleType, Samples } from "../../src/index.js";
import { kernelsOfEveryKind } from "../support/kernels.js";
import { firstDifference, promiseOf, ways } from "../support/methods.js";
import { noise, noiseImage } from "../support/noise.js";
import type { Question } from "../support/questions.js";

const types: [sample: SampleType, full: number][] = [
  ["u8", 255],
  ["u16", 65535],
  ["f32", 1],
];
const withAlpha: Channels[] = [2, 4];

/** Noise of which every third pixel or so is transparent; its hidden colours are the ones asked for. */
function holed(sample: SampleType, channels: Channels, hidden: (noiseValue: number) => number): Raster {
  const image = noiseImage(sample, 31, 20, channels, 12);
  const next = noise(5);
  for (let pixel = 0; pixel < 31 * 20; pixel++) {
    if (next() > 0.35) continue;
    for (let channel = 0; channel < channels - 1; channel++) image.data[pixel * channels + channel] = hidden(image.data[pixel * channels + channel]!);
    image.data[pixel * channels + channels - 1] = 0;
  }
  return image;
}

describe.each(types)("%s", (sample, full) => {
  test.each(kernelsOfEveryKind)("colours under transparent pixels never bleed: %s", (_, taps) => {
    for (const channels of withAlpha) {
      for (const light of ["encoded", "linear"] as const) {
        const ask = (hidden: (value: number) => number): Question => ({
          image: holed(sample, channels, hidden),
          kernel: taps,
          options: { alpha: "straight", light },
        });
        for (const way of ways(ask(() => 0))) {
          const black = way.answer(ask(() => 0));
          for (const hidden of [(value: number) => value, () => full]) {
            expect(firstDifference(way.answer(ask(hidden)), black), `${way.build} ${way.method}`).toBeUndefined();
          }
        }
      }
    }
  });
});

/** Pixels of four channels. */
function pixels(data: Samples): number[][] {
  return Array.from({ length: data.length / 4 }, (_, pixel) => Array.from(data.subarray(4 * pixel, 4 * pixel + 4)));
}

/** By construction from W3C Compositing and Blending Level 1, simple alpha compositing: colour is co / αo. */
test("an opaque red half-plane beside transparent pixels of any colour stays red", () => {
  const image: Raster<Uint8Array> = { data: new Uint8Array(24 * 10 * 4), width: 24, height: 10, channels: 4 };
  for (let pixel = 0; pixel < 240; pixel++) image.data.set(pixel % 24 < 12 ? [255, 0, 0, 255] : [10, 200, 77, 0], 4 * pixel);
  const question: Question = { image, kernel: binomial(6), options: { alpha: "straight" } };
  for (const way of ways(question)) {
    const result = way.answer(question);
    const wrong = pixels(result).filter(([red, green, blue, alpha]) => (alpha! > 0 ? red !== 255 || green !== 0 || blue !== 0 : red! + green! + blue! !== 0));
    expect(wrong, `${way.build} ${way.method}`).toEqual([]);
  }
});

function opaque(sample: SampleType, full: number, channels: Channels): Raster {
  const image = noiseImage(sample, 34, 23, channels, 21);
  for (let index = channels - 1; index < image.data.length; index += channels) image.data[index] = full;
  return image;
}

const colours = (data: Samples, channels: number): number[] => Array.from<number>(data).filter((_, index) => index % channels !== channels - 1);

describe.each(types)("%s", (sample, full) => {
  const positive = kernelsOfEveryKind.filter(([, { sum }]) => Math.abs(sum) > 0.1);
  test.each(positive)("opaque images: straight gives the colours of none: %s", (_, taps) => {
    for (const channels of withAlpha) {
      const image = opaque(sample, full, channels);
      const straight: Question = { image, kernel: taps, options: { alpha: "straight" } };
      const none: Question = { image, kernel: taps, options: { alpha: "none" } };
      for (const way of ways(straight)) {
        const one = colours(way.answer(straight), channels);
        const other = colours(way.answer(none), channels);
        const promise = promiseOf(way, none);
        const sameArithmetic = promise.arithmetic === way.arithmetic;
        const allowed = sameArithmetic ? 0 : sample === "f32" ? way.errorBound + promise.errorBound : Math.ceil(way.errorBound + promise.errorBound);
        const worst = one.reduce((largest, value, index) => Math.max(largest, Math.abs(value - other[index]!)), 0);
        expect(worst, `${way.build} ${way.method}`).toBeLessThanOrEqual(allowed);
        expect(
          Array.from(way.answer(straight)).filter((__, index) => index % channels === channels - 1),
          "alpha",
        ).toEqual(Array.from({ length: 34 * 23 }, () => full));
      }
    }
  });
});

test("premultiplied colours are held within alpha after an overshoot", () => {
  const sharpen = kernel([
    [0, -1, 0],
    [-1, 5, -1],
    [0, -1, 0],
  ]);
  const image = noiseImage("f32", 19, 14, 4, 30);
  for (let index = 0; index < image.data.length; index++) if (index % 4 < 3) image.data[index] = image.data[index]! * image.data[index - (index % 4) + 3]!;
  const question: Question = { image, kernel: sharpen, options: { alpha: "premultiplied" } };
  for (const way of ways(question)) {
    const outside = pixels(way.answer(question)).filter(([red, green, blue, alpha]) => {
      const most = Math.max(0, alpha!);
      return [red!, green!, blue!].some((colour) => !(colour >= 0 && colour <= most));
    });
    expect(outside, `${way.build} ${way.method}`).toEqual([]);
  }
});
