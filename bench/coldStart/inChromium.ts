import { chromium } from "playwright-core";
import { chromiumLaunchOptions } from "../../.build/chromium.mjs";
import { serveRepository } from "../pageServer.js";
import type { ColdStart, SampleOfStart } from "./coldStart.js";

/** Cold starts in pages of one browser, each in a context of its own that has no cache and no compiled code. */
export async function openChromium(
  executablePath: string,
): Promise<{ version: string; start(sample: SampleOfStart): Promise<ColdStart>; close(): Promise<void> }> {
  const [browser, server] = await Promise.all([chromium.launch(chromiumLaunchOptions(executablePath)), serveRepository()]);
  return {
    version: browser.version(),
    async start(sample) {
      const context = await browser.newContext();
      try {
        const page = await context.newPage();
        await page.goto(server.address);
        return await page.evaluate(async (wanted) => {
          const { measureColdStart } = (await import(/* @vite-ignore */ `${location.origin}/bench/coldStart/parts.js`)) as {
            measureColdStart(address: string, sample: string): Promise<ColdStart>;
          };
          return measureColdStart("/dist/index.js", wanted);
        }, sample);
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
