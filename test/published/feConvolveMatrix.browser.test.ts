import { describe, expect, test } from "vitest";
import type { Border } from "../../src/index.js";
import { kernel, scaled, type Kernel } from "../../src/kernels/index.js";
import { engineAnswers } from "../support/answers.js";
import { noiseImage } from "../support/noise.js";
import { bytePlane } from "../support/questions.js";
import { exampleImage } from "./cases/w3cFilterEffects.js";

interface Grey {
  data: Uint8Array;
  width: number;
  height: number;
}

const edgeModes: [edgeMode: string, border: Border][] = [
  ["duplicate", "replicate"],
  ["wrap", "periodic"],
  ["none", "zero"],
];

function canvasOf(width: number, height: number): CanvasRenderingContext2D {
  const canvas = document.createElement("canvas");
  [canvas.width, canvas.height] = [width, height];
  return canvas.getContext("2d", { willReadFrequently: true })!;
}

/** An opaque grey picture as a PNG in a data URL. */
function pictureOf({ data, width, height }: Grey): string {
  const context = canvasOf(width, height);
  const pixels = context.createImageData(width, height);
  data.forEach((value, index) => pixels.data.set([value, value, value, 255], 4 * index));
  context.putImageData(pixels, 0, 0);
  return context.canvas.toDataURL("image/png");
}

/** What this browser's own filter makes of a grey picture: the red channel of the canvas. */
async function filteredByBrowser(grey: Grey, primitive: string, space = "sRGB"): Promise<number[]> {
  const { width, height } = grey;
  const units = `filterUnits="userSpaceOnUse" primitiveUnits="userSpaceOnUse" x="0" y="0" width="${width}" height="${height}"`;
  const svg =
    `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}">` +
    `<filter id="f" ${units} color-interpolation-filters="${space}">${primitive}</filter>` +
    `<image href="${pictureOf(grey)}" width="${width}" height="${height}" style="image-rendering:pixelated" filter="url(#f)"/></svg>`;
  const picture = new Image();
  picture.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(svg)}`;
  await picture.decode();
  const context = canvasOf(width, height);
  context.drawImage(picture, 0, 0);
  const { data } = context.getImageData(0, 0, width, height);
  return Array.from({ length: width * height }, (_, index) => data[4 * index]!);
}

function primitiveOf(taps: Kernel, edgeMode: string, more = ""): string {
  const matrix = Array.from(taps.taps).join(" ");
  return `<feConvolveMatrix order="${taps.width},${taps.height}" kernelMatrix="${matrix}" edgeMode="${edgeMode}" preserveAlpha="true" ${more}/>`;
}

/** Largest difference of the browser's bytes from each method's result before rounding, held to 0 … 255 as the browser holds it. */
function checkAgainst(bytes: number[], grey: Grey, taps: Kernel, border: Border, offset: number, allowed: number): void {
  const answers = engineAnswers({ image: { ...grey, channels: 1 }, kernel: taps, options: { border, output: { sample: "f32", offset } } });
  for (const { from, data, errorBound } of answers) {
    const worst = bytes.reduce((most, byte, index) => Math.max(most, Math.abs(byte - Math.min(255, Math.max(0, data[index]!)))), 0);
    expect(worst, from).toBeLessThanOrEqual(allowed + errorBound);
  }
}

/** The browser's rounding, with a little for its own single precision; above order 5 its rounding was seen to be off by up to 0.75. */
const rounding = (order: number): number => (order <= 5 ? 0.52 : 0.8);

/**
 * Source   W3C, Filter Effects Module Level 1, feConvolveMatrix, as the browser that runs this test draws it. Opaque pixels, sRGB and
 *          preserveAlpha keep premultiplication and linear light out of the comparison.
 */
describe("this browser's own feConvolveMatrix", () => {
  const example: Grey = bytePlane(exampleImage) as Grey;
  const noisy: Grey = noiseImage("u8", 64, 64, 1, 12345) as Grey;

  test.each(edgeModes)("edgeMode %s: the example of the specification", async (edgeMode, border) => {
    const oneToNine = kernel([
      [1, 2, 3],
      [4, 5, 6],
      [7, 8, 9],
    ]);
    checkAgainst(await filteredByBrowser(example, primitiveOf(oneToNine, edgeMode)), example, scaled(oneToNine, 1 / 45), border, 0, rounding(3));
  });

  test.each(edgeModes)("edgeMode %s: orders 2 … 16 on noise", async (edgeMode, border) => {
    for (const order of [2, 3, 4, 5, 7, 10, 16]) {
      const weights = Array.from({ length: order * order }, (_, i) => ((7 * i) % 11) + 1);
      const taps = kernel(Array.from({ length: order }, (_, j) => weights.slice(j * order, (j + 1) * order)));
      checkAgainst(await filteredByBrowser(noisy, primitiveOf(taps, edgeMode)), noisy, scaled(taps, 1 / taps.sum), border, 0, rounding(order));
    }
  });

  test("a Sobel mask with bias one half", async () => {
    const sobel = kernel([
      [1, 0, -1],
      [2, 0, -2],
      [1, 0, -1],
    ]);
    checkAgainst(await filteredByBrowser(example, primitiveOf(sobel, "duplicate", 'bias="0.5"')), example, sobel, "replicate", 127.5, rounding(3));
  });

  test("a sharpening mask, held to 0 … 255", async () => {
    const sharpen = kernel([
      [0, -1, 0],
      [-1, 5, -1],
      [0, -1, 0],
    ]);
    checkAgainst(await filteredByBrowser(noisy, primitiveOf(sharpen, "duplicate")), noisy, sharpen, "replicate", 0, rounding(3));
  });

  test("another target is another origin: turned taps count it from the other end", async () => {
    const rows = [
      [5, 1, 2],
      [1, 3, 4],
    ];
    for (const [targetX, targetY] of [
      [0, 0],
      [2, 1],
      [0, 1],
    ] as const) {
      const taps = kernel(rows, { origin: { x: 2 - targetX, y: 1 - targetY } });
      const bytes = await filteredByBrowser(noisy, primitiveOf(taps, "duplicate", `targetX="${targetX}" targetY="${targetY}"`));
      checkAgainst(bytes, noisy, scaled(taps, 1 / taps.sum), "replicate", 0, rounding(3));
    }
  });

  test("linearRGB: a checkerboard averages to 188, as light: linear gives", async () => {
    const checkerboard: Grey = { data: Uint8Array.from({ length: 64 }, (_, index) => (((index >> 3) + index) % 2) * 255), width: 8, height: 8 };
    const square = kernel([
      [1, 1],
      [1, 1],
    ]);
    const bytes = await filteredByBrowser(checkerboard, primitiveOf(square, "wrap"), "linearRGB");
    const options = { border: "periodic", light: "linear" } as const;
    for (const { from, data } of engineAnswers({ image: { ...checkerboard, channels: 1 }, kernel: scaled(square, 1 / 4), options })) {
      expect(new Set(Array.from(data)), from).toEqual(new Set([188]));
      // The browser holds linear values in bytes: above code 50 that costs it one level, and its final rounding another.
      bytes.forEach((byte, index) => expect(Math.abs(byte - data[index]!), from).toBeLessThanOrEqual(2));
    }
  });
});
