import { readFileSync } from "node:fs";
import { createRequire } from "node:module";
import { chromium, type Browser, type BrowserContextOptions, type Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { chromiumLaunchOptions, findChromium } from "../../.build/chromium.mjs";
import { nodeDocument } from "../../src/report/nodeDocument.js";
import { reportHtml } from "../../src/report/report.js";
import { sampleCrossover, sampleProfile } from "../report/samples.js";

/** A crossover with everything that takes room. */
const crossover = {
  ...sampleCrossover({ methods: ["direct", "separable", "running-sum", "fft"], untimedFrom: { direct: 63 } }),
  host: "A made-up processor with a name that is longer than most are, 64 threads, some runtime 99.9",
  notes: ["Not measured for want of time or memory: 91×91, 127×127."],
};
const html = reportHtml({ crossover, profile: sampleProfile(), document: nodeDocument(), earlier: sampleCrossover({ slower: 1.6 }) });
const address = "http://report.test/";
const axe = readFileSync(createRequire(import.meta.url).resolve("axe-core/axe.min.js"), "utf8");

let browser: Browser;
const requests: string[] = [];
const complaints: string[] = [];

beforeAll(async () => {
  browser = await chromium.launch(chromiumLaunchOptions(findChromium()!));
}, 120_000);

afterAll(async () => {
  await browser.close();
});

async function withReport<T>(options: BrowserContextOptions, use: (page: Page) => Promise<T>): Promise<T> {
  const context = await browser.newContext(options);
  try {
    const page = await context.newPage();
    page.on("console", (message) => complaints.push(message.text()));
    await page.route("**/*", async (route) => {
      requests.push(route.request().url());
      await (route.request().url() === address ? route.fulfill({ contentType: "text/html", body: html }) : route.abort());
    });
    await page.goto(address);
    return await use(page);
  } finally {
    await context.close();
  }
}

const viewports = [
  { width: 360, height: 740 },
  { width: 700, height: 900 },
  { width: 1200, height: 900 },
];

/** Boxes of the texts in the drawing that is shown, and of the drawing itself. */
function textBoxes(page: Page) {
  return page.evaluate(() => {
    const box = (element: Element, name: string) => {
      const { left, right, top, bottom } = element.getBoundingClientRect();
      return { name, left, right, top, bottom };
    };
    const svg = [...document.querySelectorAll("figure svg")].find((one) => one.getBoundingClientRect().width > 0)!;
    return { drawing: box(svg, "drawing"), texts: [...svg.querySelectorAll("text")].map((text) => box(text, text.textContent ?? "")) };
  });
}

describe("the report in a browser", () => {
  test.each(viewports)("$width pixels: nothing is wider than the page, and no label of the chart covers another or leaves the page", async (viewport) => {
    await withReport({ viewport }, async (page) => {
      expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBe(viewport.width);
      const { texts } = await textBoxes(page);
      expect(texts.length).toBeGreaterThan(20);
      for (const { name, left, right } of texts) expect(left >= 0 && right <= viewport.width, name).toBe(true);
      // Boxes of text reach above and below the letters.
      const overlaps = texts.flatMap((a, k) =>
        texts
          .slice(k + 1)
          .filter((b) => Math.min(a.right, b.right) - Math.max(a.left, b.left) > 1 && Math.min(a.bottom, b.bottom) - Math.max(a.top, b.top) > 4)
          .map((b) => `${a.name} / ${b.name}`),
      );
      expect(overlaps).toEqual([]);
    });
  });

  test.each([viewports[0]!, viewports[2]!].flatMap((viewport) => (["light", "dark"] as const).map((colorScheme) => ({ viewport, colorScheme }))))(
    "axe finds nothing to complain about: %j",
    async (options) => {
      const violations = await withReport(options, async (page) => {
        await page.evaluate(axe);
        await page.evaluate(() => {
          for (const one of document.querySelectorAll("details")) one.open = true;
        });
        const found = await page.evaluate("axe.run()");
        return (found as { violations: { id: string; nodes: { html: string }[] }[] }).violations;
      });
      expect(violations.map(({ id, nodes }) => [id, nodes.map((node) => node.html)])).toEqual([]);
    },
  );

  test("on paper it is light, whole, and shows the prices too", async () => {
    await withReport({ viewport: { width: 700, height: 900 }, colorScheme: "dark" }, async (page) => {
      await page.emulateMedia({ media: "print" });
      const seen = await page.evaluate(() => ({
        paper: getComputedStyle(document.body).backgroundColor,
        ink: getComputedStyle(document.body).color,
        line: getComputedStyle(document.querySelector("figure .medium .measured.fft")!).stroke,
        scrolling: [...document.querySelectorAll(".scroll")].map((one) => getComputedStyle(one).overflowX),
        prices: document.querySelector("details table")!.getBoundingClientRect().height,
        cut: [...document.querySelectorAll("table")].filter((table) => table.getBoundingClientRect().right > 700).length,
      }));
      expect(seen).toMatchObject({ paper: "rgb(255, 255, 255)", ink: "rgb(0, 0, 0)", line: "rgb(10, 79, 158)", cut: 0 });
      expect(new Set(seen.scrolling)).toEqual(new Set(["visible"]));
      expect(seen.prices).toBeGreaterThan(100);
    });
  });

  test("all of it came in one request, and its policy had nothing to refuse", () => {
    expect(requests.length).toBeGreaterThan(5);
    expect(new Set(requests)).toEqual(new Set([address]));
    expect(complaints).toEqual([]);
  });
});
