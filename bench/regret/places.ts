import { execFileSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { chromium } from "playwright-core";
import { chromiumLaunchOptions } from "../../.build/chromium.mjs";
import type { HardwareProfile } from "../../src/index.js";
import { serveRepository } from "../pageServer.js";
import { processorMilliseconds } from "../processorTime.js";
import { bundlePath } from "./bundle.js";
import type { Inside } from "./inside.js";

/** Calls of what runs inside, wherever that is. */
export type Place = {
  /** Node 20.20.2, Chromium 156.0 … */
  name: string;
  clock: "processor time" | "wall clock";
  call<K extends Exclude<keyof Inside, "build">>(name: K, ...parameters: Parameters<Inside[K]>): Promise<Awaited<ReturnType<Inside[K]>>>;
  /** Measures a profile where nothing has run before: in a new process, in a new page. */
  measureProfile(): Promise<HardwareProfile>;
  close(): Promise<void>;
};

type Module = { open(clock?: () => number): Promise<Inside>; freshProfile(): Promise<HardwareProfile> };
type AnyCall = (...parameters: unknown[]) => unknown;

const profileScript = fileURLToPath(new URL("profileInProcess.js", import.meta.url));

export async function openNode(): Promise<Place> {
  const address = new URL(`../../${bundlePath}`, import.meta.url).href;
  const { open } = (await import(address)) as Module;
  const inside = await open(processorMilliseconds);
  return {
    name: `Node ${process.versions.node}`,
    clock: "processor time",
    call: async (name, ...parameters) => (await (inside[name] as AnyCall)(...parameters)) as never,
    measureProfile: async () => JSON.parse(execFileSync(process.execPath, [profileScript, address], { encoding: "utf8" })) as HardwareProfile,
    close: async () => {},
  };
}

/** A page of a browser of its own; isolated, so that its clock has the finest step that pages get. */
export async function openChromium(executablePath: string): Promise<Place> {
  const [browser, server] = await Promise.all([chromium.launch(chromiumLaunchOptions(executablePath)), serveRepository()]);
  const page = await browser.newPage();
  await page.goto(server.address);
  await page.evaluate(async (path) => {
    const { open } = (await import(/* @vite-ignore */ `${location.origin}/${path}`)) as Module;
    (globalThis as unknown as { inside: Inside }).inside = await open();
  }, bundlePath);
  return {
    name: `Chromium ${browser.version()}`,
    clock: "wall clock",
    call: (name, ...parameters) =>
      page.evaluate(([called, given]) => (globalThis as unknown as { inside: Record<string, AnyCall> }).inside[called]!(...given), [
        name as string,
        parameters as unknown[],
      ] as const) as Promise<never>,
    async measureProfile() {
      const context = await browser.newContext();
      try {
        const fresh = await context.newPage();
        await fresh.goto(server.address);
        return await fresh.evaluate(async (path) => ((await import(/* @vite-ignore */ `${location.origin}/${path}`)) as Module).freshProfile(), bundlePath);
      } finally {
        await context.close();
      }
    },
    async close() {
      await browser.close();
      server.stop();
    },
  };
}
