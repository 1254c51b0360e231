import { chromium, type Page } from "playwright-core";
import { chromiumLaunchOptions } from "../../.build/chromium.mjs";
import { serveRepository } from "../pageServer.js";
import type { FrameHost, FrameWork, Loop, Stage } from "./frameHost.js";

/** In the page: the loop's module and its stage, kept between calls. */
interface PageGlobals {
  loop: Loop;
  stage: Stage;
}

/** Calls of the loop in a page. */
const callsIn = (page: Page): Omit<FrameHost, "name" | "session" | "close"> => ({
  prepare: (work: FrameWork) =>
    page.evaluate(async (wanted) => {
      const kept = globalThis as unknown as PageGlobals;
      kept.loop = (await import(/* @vite-ignore */ `${location.origin}/bench/frames/loop.js`)) as Loop;
      kept.stage = await kept.loop.prepareFrames(await import(/* @vite-ignore */ `${location.origin}/dist/index.js`), wanted);
      return { method: kept.stage.method, arithmetic: kept.stage.arithmetic };
    }, work),
  warmUp: (frames) => page.evaluate((count) => (globalThis as unknown as PageGlobals).loop.warmUp((globalThis as unknown as PageGlobals).stage, count), frames),
  run: (frames) => page.evaluate((count) => (globalThis as unknown as PageGlobals).loop.runAll((globalThis as unknown as PageGlobals).stage, count), frames),
  times: () =>
    page.evaluate(() => {
      const { frames, control } = (globalThis as unknown as PageGlobals).stage.times;
      return { frames: [...frames], control: [...control] };
    }),
  engineBytes: () => page.evaluate(() => (globalThis as unknown as PageGlobals).loop.engineBytes((globalThis as unknown as PageGlobals).stage)),
  async firstResult() {
    const { image, result } = await page.evaluate(() => {
      const { loop, stage } = globalThis as unknown as PageGlobals;
      return loop.firstInBase64(stage);
    });
    return { image: new Uint8Array(Buffer.from(image, "base64")), result: new Uint8Array(Buffer.from(result, "base64")) };
  },
});

/** Frames in a page of a browser of its own. */
export async function openChromium(executablePath: string): Promise<FrameHost> {
  const [browser, server] = await Promise.all([chromium.launch(chromiumLaunchOptions(executablePath)), serveRepository()]);
  const page = await browser.newPage();
  await page.goto(server.address);
  const inspector = await page.context().newCDPSession(page);
  await inspector.send("HeapProfiler.enable");
  return {
    name: `Chromium ${browser.version()}`,
    session: { send: (method, parameters) => (inspector.send as (...all: unknown[]) => Promise<unknown>).call(inspector, method, parameters) },
    ...callsIn(page),
    async close() {
      await browser.close();
      server.stop();
    },
  };
}
