import { Session } from "node:inspector/promises";
import { chromium } from "playwright-core";
import { chromiumLaunchOptions } from "../../.build/chromium.mjs";
import { serveRepository } from "../pageServer.js";
import type { InspectorSession } from "./session.js";

/** What is filtered: one size, one kernel. */
export interface FrameWork {
  width: number;
  height: number;
  taps: number;
  frames: number;
}

/** Where frames are filtered: calls of bench/frames/loop.js, and the inspector of the place. */
export interface FrameHost {
  /** Node 20.20.2, Chromium 156.0 … */
  name: string;
  session: InspectorSession;
  prepare(work: FrameWork): Promise<{ method: string; arithmetic: string }>;
  warmUp(frames: number): Promise<void>;
  run(frames: number): Promise<void>;
  times(): Promise<{ frames: number[]; control: number[] }>;
  engineBytes(): Promise<number>;
  /** The result for the first image, and that image. */
  firstResult(): Promise<{ image: Uint8Array; result: Uint8Array }>;
  close(): Promise<void>;
}

interface Stage {
  method: string;
  arithmetic: string;
  planes: { data: Uint8Array }[];
  times: { frames: Float64Array; control: Float64Array };
}

interface Loop {
  prepareFrames(library: unknown, work: FrameWork): Promise<Stage>;
  warmUp(stage: Stage, frames: number): void;
  runAll(stage: Stage, frames: number): void;
  engineBytes(stage: Stage): number;
  firstResult(stage: Stage): Uint8Array;
  firstInBase64(stage: Stage): { image: string; result: string };
}

export async function openNode(): Promise<FrameHost> {
  const session = new Session();
  session.connect();
  const [loop, library] = (await Promise.all(["./loop.js", "../../dist/index.js"].map((path) => import(new URL(path, import.meta.url).href)))) as [
    Loop,
    unknown,
  ];
  let stage: Stage;
  return {
    name: `Node ${process.versions.node}`,
    session: { send: (method, parameters) => (session.post as (...all: unknown[]) => Promise<unknown>).call(session, method, parameters) },
    async prepare(work) {
      stage = await loop.prepareFrames(library, work);
      return stage;
    },
    warmUp: async (frames) => loop.warmUp(stage, frames),
    run: async (frames) => loop.runAll(stage, frames),
    times: async () => ({ frames: [...stage.times.frames], control: [...stage.times.control] }),
    engineBytes: async () => loop.engineBytes(stage),
    firstResult: async () => ({ image: stage.planes[0]!.data, result: loop.firstResult(stage) }),
    close: async () => session.disconnect(),
  };
}

/** In the page: the loop's module and its stage, kept between calls. */
interface PageGlobals {
  loop: Loop;
  stage: Stage;
}

export async function openChromium(executablePath: string): Promise<FrameHost> {
  const [browser, server] = await Promise.all([chromium.launch(chromiumLaunchOptions(executablePath)), serveRepository()]);
  const page = await browser.newPage();
  await page.goto(server.address);
  const inspector = await page.context().newCDPSession(page);
  await inspector.send("HeapProfiler.enable");
  return {
    name: `Chromium ${browser.version()}`,
    session: { send: (method, parameters) => (inspector.send as (...all: unknown[]) => Promise<unknown>).call(inspector, method, parameters) },
    prepare: (work) =>
      page.evaluate(async (wanted) => {
        const kept = globalThis as unknown as PageGlobals;
        kept.loop = (await import(/* @vite-ignore */ `${location.origin}/bench/frames/loop.js`)) as Loop;
        kept.stage = await kept.loop.prepareFrames(await import(/* @vite-ignore */ `${location.origin}/dist/index.js`), wanted);
        return { method: kept.stage.method, arithmetic: kept.stage.arithmetic };
      }, work),
    warmUp: (frames) =>
      page.evaluate((count) => (globalThis as unknown as PageGlobals).loop.warmUp((globalThis as unknown as PageGlobals).stage, count), frames),
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
    async close() {
      await browser.close();
      server.stop();
    },
  };
}
