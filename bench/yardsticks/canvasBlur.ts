import { chromium } from "playwright-core";
import { chromiumLaunchOptions } from "../../.build/chromium.mjs";
import { serveRepository } from "../pageServer.js";

/** Milliseconds of each turn, ours and the canvas's, in one page. */
export interface BlurTimes {
  version: string;
  ours: number[];
  canvas: number[];
}

/** Runs that are not counted: on one core a page's compiler takes a while to come to its best code. */
const warmTurns = 20;

/**
 * A blur of RGBA bytes in a page: `ctx.filter = "blur(…px)"` on a canvas in main memory (willReadFrequently), read back by one pixel so that
 * it is done, and a prepared filter of the built package with the same sigma, in turns. The browser's blur is an approximation of its own.
 */
export async function timeBlurs(executablePath: string, shape: { width: number; height: number; sigma: number; turns: number }): Promise<BlurTimes> {
  const [browser, server] = await Promise.all([chromium.launch(chromiumLaunchOptions(executablePath)), serveRepository()]);
  try {
    const page = await browser.newPage();
    await page.goto(server.address);
    const times = await page.evaluate(
      async ({ width, height, sigma, turns, warmTurns }) => {
        const library = (await import(/* @vite-ignore */ `${location.origin}/dist/index.js`)) as typeof import("../../src/index.js");
        const [source, target] = [0, 1].map(() =>
          Object.assign(document.createElement("canvas"), { width, height }).getContext("2d", { willReadFrequently: true })!,
        );
        const image = source!.createImageData(width, height);
        for (let k = 0; k < image.data.length; k++) image.data[k] = k % 4 === 3 ? 255 : (k * 7919) % 256;
        source!.putImageData(image, 0, 0);
        const engine = await library.createEngine();
        const filter = engine.prepare(library.gaussian({ sigma }), { width, height, channels: 4, sample: "u8" }, {});
        const result = { data: new Uint8ClampedArray(image.data.length), width, height, channels: 4 as const };
        const kept = { ours: [] as number[], canvas: [] as number[] };
        for (let turn = -warmTurns; turn < turns; turn++) {
          const begun = performance.now();
          filter.run({ data: image.data, width, height }, result);
          const between = performance.now();
          target!.filter = `blur(${sigma}px)`;
          target!.drawImage(source!.canvas, 0, 0);
          target!.getImageData(0, 0, 1, 1);
          if (turn < 0) continue;
          kept.ours.push(between - begun);
          kept.canvas.push(performance.now() - between);
        }
        return kept;
      },
      { ...shape, warmTurns },
    );
    return { version: browser.version(), ...times };
  } finally {
    await browser.close();
    server.stop();
  }
}
