/** `npm run pictures:page`: the measuring page on a phone and on a desk, after a measurement on this machine, for the README. */
import { fileURLToPath } from "node:url";
import { chromium, type Page } from "playwright-core";
import { chromiumLaunchOptions, findChromium } from "../../.build/chromium.mjs";
import { buildPage } from "../page/build.js";
import { servePage } from "../page/serve.js";

const folder = fileURLToPath(new URL("./", import.meta.url));
const desk = { width: 1080, height: 1240 };
const phone = { width: 360, height: 900 };

/** More than the measurement takes on a machine that is busy besides. */
const patience = 120_000;

/** What the window shows, once the chart has found its width. */
async function take(page: Page, name: string): Promise<void> {
  await page.waitForTimeout(500);
  await page.screenshot({ path: `${folder}${name}.png` });
  console.log(`written: bench/pictures/${name}.png`);
}

const executablePath = findChromium();
if (executablePath === undefined) throw new Error("No Chromium found. Set TAPWISE_CHROMIUM to its path.");
const [browser, server] = await Promise.all([chromium.launch(chromiumLaunchOptions(executablePath)), buildPage().then((page) => servePage(page, 0, false))]);
try {
  const page = await browser.newPage({ viewport: desk, deviceScaleFactor: 1.5, colorScheme: "light" });
  await page.goto(`http://localhost:${server.port}/`);
  await page.getByRole("button", { name: "Measure this device" }).click();
  await page.getByRole("heading", { name: "What was found", exact: true }).waitFor({ timeout: patience });
  console.log(await page.locator("#verdict").innerText());
  await page.locator("#choices").evaluate((choices) => choices.removeAttribute("open"));
  // The focus is on the heading of the results; a picture shows it better without the ring.
  await page.evaluate(() => {
    (document.activeElement as HTMLElement).blur();
    scrollTo(0, 0);
  });
  await take(page, "page-desktop");
  await page.emulateMedia({ colorScheme: "dark" });
  await page.setViewportSize(phone);
  await page.locator("#findings").evaluate((findings) => findings.scrollIntoView());
  await take(page, "page-phone");
} finally {
  await browser.close();
  await server.stop();
}
