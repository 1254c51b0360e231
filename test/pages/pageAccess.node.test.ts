import { readFile } from "node:fs/promises";
import { createRequire } from "node:module";
import type { AxeResults, RunOptions } from "axe-core";
import type { BrowserContextOptions, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { MeasuringPage } from "./measuringPage.js";
import { openPageHouse, type PageHouse } from "./pageHouse.js";

let house: PageHouse;
let axeScript: string;

beforeAll(async () => {
  house = await openPageHouse();
  axeScript = await readFile(createRequire(import.meta.url).resolve("axe-core/axe.min.js"), "utf8");
}, 120_000);
afterAll(() => house?.close());

/** What axe-core finds against all its rules, best practices and the WCAG levels A and AA among them. */
async function violations(page: Page): Promise<string[]> {
  if (!(await page.evaluate(() => "axe" in globalThis))) await page.evaluate(axeScript);
  const found = await page.evaluate(() =>
    (globalThis as unknown as { axe: { run(where: Document, options: RunOptions): Promise<AxeResults> } }).axe.run(document, { resultTypes: ["violations"] }),
  );
  return found.violations.map(
    ({ id, nodes }) => `${id}: ${nodes.map(({ html, failureSummary }) => `${html.slice(0, 120)} ${failureSummary ?? ""}`).join(" | ")}`,
  );
}

/** Elements that reach out of the window to the right, but for what scrolls by itself. */
async function tooWide(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const { clientWidth, scrollWidth } = document.documentElement;
    const wide = [...document.body.querySelectorAll("*")].filter(
      (one) => one.closest(".scroll, .unseen, svg") === null && one.getBoundingClientRect().right > clientWidth + 0.5,
    );
    return [...(scrollWidth > clientWidth ? [`the page: ${scrollWidth}`] : []), ...wide.map((one) => `${one.tagName} ${one.id}`)];
  });
}

/** What is touched and is less than 44 pixels high or wide. */
async function tooSmall(page: Page): Promise<string[]> {
  return page.evaluate(() =>
    [...document.querySelectorAll("button, select, summary, label[for=remember]")]
      .filter((one) => one.checkVisibility())
      .map((one) => ({ one, box: one.getBoundingClientRect() }))
      .filter(({ box }) => box.height < 44 || box.width < 44)
      .map(({ one, box }) => `${one.tagName} ${one.id}: ${box.width} × ${box.height}`),
  );
}

/** The page in each of its states; `look` is called in each. */
async function throughAllStates(options: BrowserContextOptions, look: (page: Page, state: string) => Promise<void>): Promise<void> {
  const opened = await MeasuringPage.open(house.browser, house.address, options);
  const { page } = opened;
  await look(page, "before");
  await opened.chooseLittle();
  await look(page, "choosing");
  await opened.start();
  await page.getByText("Step 1 of 2").waitFor();
  await look(page, "first step");
  await opened.untilGrowing();
  await look(page, "growing");
  await opened.untilDone();
  await look(page, "after");
  const { content } = await opened.saved("Save the results");
  await opened.choose("earlier.json", JSON.stringify(content));
  await page.getByText("Compared with “earlier.json”").waitFor();
  await look(page, "comparing");
  await opened.drop({ name: "a-very-long-name-of-a-photograph-that-was-dropped-by-mistake-onto-this-page.json", content: "no" });
  await page.getByRole("alert").first().waitFor();
  await look(page, "trouble");
  await opened.close();
}

describe("axe-core finds nothing in any state", () => {
  test.each([
    ["light, wide", { colorScheme: "light" }],
    ["dark, wide", { colorScheme: "dark" }],
    ["dark, a phone", { colorScheme: "dark", viewport: { width: 360, height: 740 } }],
  ] as const)("%s", async (_, options) => {
    const found: string[] = [];
    await throughAllStates(options, async (page, state) => void found.push(...(await violations(page)).map((one) => `${state}: ${one}`)));
    expect(found).toEqual([]);
  });

  test("it would find something", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.page.evaluate(() => {
      document.querySelector("label[for=picture]")!.remove();
      (document.querySelector("#choices") as HTMLDetailsElement).open = true;
    });
    expect((await violations(opened.page)).join()).toContain("select-name");
    await opened.close();
  });
});

describe("a phone of 360 pixels", () => {
  test("nothing scrolls sideways but the table, and everything that is touched is 44 pixels high", async () => {
    const found: string[] = [];
    await throughAllStates({ viewport: { width: 360, height: 740 }, hasTouch: true, isMobile: true }, async (page, state) => {
      found.push(...[...(await tooWide(page)), ...(await tooSmall(page))].map((one) => `${state}: ${one}`));
    });
    expect(found).toEqual([]);
  });

  test("the button is in sight without scrolling", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address, { viewport: { width: 360, height: 640 } });
    const { bottom } = await opened.button("Measure this device").evaluate((button) => button.getBoundingClientRect().toJSON() as DOMRect);
    expect(bottom).toBeLessThan(640);
    await opened.close();
  });
});

/** Where the focus is: an id, or what kind of element. */
const focused = (page: Page): Promise<string> =>
  page.evaluate(() => document.activeElement?.id || (document.activeElement?.className ?? "") || (document.activeElement?.tagName ?? ""));

/** Ids in the order in which the tabulator reaches them, from the top. */
async function tabOrder(page: Page): Promise<string[]> {
  await page.mouse.click(2, 2);
  const order: string[] = [];
  for (let stop = 0; stop < 30; stop++) {
    await page.keyboard.press("Tab");
    const now = await focused(page);
    if (now === "BODY" || order.includes(now)) break;
    order.push(now);
    const outline = await page.evaluate(() => getComputedStyle(document.activeElement!).outlineWidth);
    expect(`${now} ${outline}`).toBe(`${now} 3px`);
  }
  return order;
}

describe("by keyboard alone", () => {
  test("the order is the one on the page, the focus is seen, and never lost", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address, { viewport: { width: 360, height: 740 } });
    const { page } = opened;
    expect(await tabOrder(page)).toEqual(["SUMMARY", "measure", "choose-earlier"]);
    await page.locator("summary").focus();
    await page.keyboard.press("Enter");
    const threads = (await page.getByLabel("Work on").isVisible()) ? ["threads"] : [];
    expect(await tabOrder(page)).toEqual([
      "SUMMARY",
      "picture",
      "colours",
      "values",
      "filter",
      ...threads,
      "duration",
      "remember",
      "measure",
      "choose-earlier",
    ]);
    await page.locator("#picture").focus();
    await page.keyboard.press("Home");
    await page.locator("#duration").focus();
    await page.keyboard.press("Home");
    await page.locator("#measure").focus();
    await page.keyboard.press("Enter");
    expect(await focused(page)).toBe("stop");
    await opened.untilDone();
    expect(await focused(page)).toBe("findings-title");
    await page.keyboard.press("Tab");
    expect(await focused(page)).toBe("scroll");
    await page.keyboard.press("Tab");
    expect(await focused(page)).toBe("save-results");
    const [download] = await Promise.all([page.waitForEvent("download"), page.keyboard.press("Enter")]);
    expect(download.suggestedFilename()).toMatch(/^tapwise-results-/);
    for (const next of ["save-profile", "save-report", "choose-earlier"]) {
      await page.keyboard.press("Tab");
      expect(await focused(page)).toBe(next);
    }
    const [chooser] = await Promise.all([page.waitForEvent("filechooser"), page.keyboard.press("Space")]);
    expect(chooser.isMultiple()).toBe(false);
    await opened.close();
  });

  test("stopped by keyboard", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.button("Measure this device").focus();
    await opened.page.keyboard.press("Enter");
    await opened.page.keyboard.press("Enter");
    await opened.page.locator("#underway").waitFor({ state: "hidden" });
    expect(await focused(opened.page)).toBe("measure");
    await opened.close();
  });
});

describe("wishes of the person", () => {
  test.each([
    ["reduce", 0],
    ["no-preference", 1],
  ] as const)("movement, where the wish is: %s", async (reducedMotion, least) => {
    const opened = await MeasuringPage.open(house.browser, house.address, { reducedMotion });
    const moving = await opened.page.evaluate(
      () =>
        [...document.querySelectorAll("*")].filter((one) => {
          const { transitionDuration, animationName } = getComputedStyle(one);
          return !/^0s(, 0s)*$/.test(transitionDuration) || animationName !== "none";
        }).length,
    );
    expect(Math.min(moving, 1)).toBe(least);
    await opened.close();
  });

  test("text of twice the size has room on a phone", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address, { viewport: { width: 360, height: 740 } });
    await opened.page.addStyleTag({ content: "html { font-size: 200% }" });
    await opened.chooseLittle();
    expect(await tooWide(opened.page)).toEqual([]);
    await opened.close();
  });
});
