import { chromium, type Browser } from "playwright-core";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { chromiumLaunchOptions, findChromium } from "../../.build/chromium.mjs";
import { startServer } from "./server.js";

let browser: Browser;
let server: Awaited<ReturnType<typeof startServer>>;

beforeAll(async () => {
  const executablePath = findChromium();
  if (executablePath === undefined) throw new Error("No Chromium found.");
  [browser, server] = await Promise.all([chromium.launch(chromiumLaunchOptions(executablePath)), startServer()]);
}, 120_000);
afterAll(async () => {
  await browser?.close();
  await server?.stop();
});

async function shownBy(path: string): Promise<Record<string, unknown>> {
  const page = await browser.newPage();
  page.setDefaultTimeout(120_000);
  await page.goto(server.address + path);
  await page.waitForFunction(() => document.querySelector("output")?.textContent !== "", undefined);
  const shown = JSON.parse((await page.textContent("output")) ?? "");
  await page.close();
  return shown;
}

const right = (threads: number) => ({ threads, same: true });

describe("two threads in a page give the bytes of one", () => {
  test("cross-origin isolated: over one memory, transforms too", async () => {
    expect(await shownBy("/threads-isolated.html")).toEqual({
      isolated: true,
      threads: 2,
      found: { separable: right(2), direct: right(2), fft: right(2) },
    });
  });

  test("not isolated: bands go to a memory of their own, transforms stay", async () => {
    expect(await shownBy("/threads.html")).toEqual({
      isolated: false,
      threads: 2,
      found: { separable: right(2), direct: right(2), fft: right(1) },
    });
  });

  test.each(["/threads-blocked.html", "/threads.html?missing", "/threads-isolated.html?missing"])("no worker is to be had: %s", async (path) => {
    expect(await shownBy(path)).toMatchObject({ threads: 1, found: { separable: right(1), direct: right(1), fft: right(1) } });
  });
});
