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

/** Opens a page of the server: what it shows, what it complained of, what it asked for. */
async function visitPage(path: string): Promise<{ shown: Record<string, unknown>; complaints: string[]; requests: string[] }> {
  const before = server.requests.length;
  const page = await browser.newPage();
  const complaints: string[] = [];
  page.on("pageerror", (error) => complaints.push(error.message));
  page.on("console", (message) => complaints.push(message.text()));
  page.setDefaultTimeout(120_000);
  await page.goto(server.address + path);
  await page.waitForFunction(() => document.querySelector("output")?.textContent !== "", undefined);
  const shown = JSON.parse((await page.textContent("output")) ?? "");
  await page.close();
  return { shown, complaints, requests: server.requests.slice(before) };
}

const around = (taps: number[]): number[] => [0, 0, 0, 0, 0, 0, ...taps.slice(0, 3), 0, 0, ...taps.slice(3, 6), 0, 0, ...taps.slice(6, 9), 0, 0, 0, 0, 0, 0];

describe("the built package in a plain page", () => {
  test("runs without a bundler under script-src 'self' 'wasm-unsafe-eval'", async () => {
    const { shown, complaints, requests } = await visitPage("/plain.html");
    const taps = around([1, 2, 3, 4, 5, 6, 7, 8, 9]);
    expect(shown).toMatchObject({ build: "simd", direct: taps, drawable: [200, 255] });
    expect((shown.fft as number[]).map((value) => Math.round(value) + 0)).toEqual(taps);
    expect(complaints).toEqual([]);
    expect(requests.filter((request) => /scalar|debug|\/cli\//.test(request))).toEqual([]);
  });

  test("names the directive that a stricter policy lacks", async () => {
    const { shown } = await visitPage("/blocked.html");
    expect(shown).toMatchObject({ isConvolutionError: true, code: "webassembly-blocked", fault: "host" });
    expect(shown.message).toContain("'wasm-unsafe-eval'");
    expect(shown.message).toContain("script-src");
  });
});
