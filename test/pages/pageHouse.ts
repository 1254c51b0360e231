import { chromium, type Browser } from "playwright-core";
import { chromiumLaunchOptions, findChromium } from "../../.build/chromium.mjs";
import { buildPage } from "../../bench/page/build.js";
import { servePage } from "../../bench/page/serve.js";

/** A name that is no secure address, as a phone sees the machine that serves the page. */
const networkName = "measured.test";

/** The page that measures, built and served, and a browser. */
export interface PageHouse {
  browser: Browser;
  /** Isolated. */
  address: string;
  /** The same page from an address that is not secure. */
  networkAddress: string;
  close(): Promise<void>;
}

export async function openPageHouse(): Promise<PageHouse> {
  const executablePath = findChromium();
  if (executablePath === undefined) throw new Error("No Chromium found.");
  const options = chromiumLaunchOptions(executablePath);
  const args = [...options.args, `--host-resolver-rules=MAP ${networkName} 127.0.0.1`];
  const [browser, { port, stop }] = await Promise.all([chromium.launch({ ...options, args }), buildPage().then((page) => servePage(page, 0, false))]);
  return {
    browser,
    address: `http://localhost:${port}/`,
    networkAddress: `http://${networkName}:${port}/`,
    async close() {
      await browser.close();
      await stop();
    },
  };
}
