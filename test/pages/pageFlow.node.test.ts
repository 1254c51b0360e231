import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { createEngine, type HardwareProfile } from "../../src/index.js";
import type { Crossover } from "../../src/measure/index.js";
import { threeDigits } from "../../src/report/figures.js";
import { answerSentence } from "../../src/report/sentences.js";
import { MeasuringPage } from "./measuringPage.js";
import { openPageHouse, type PageHouse } from "./pageHouse.js";

let house: PageHouse;

beforeAll(async () => {
  house = await openPageHouse();
}, 120_000);
afterAll(() => house?.close());

const today = /^tapwise-(results|profile)-\d{4}-\d{2}-\d{2}/;

/** First and second figure of each time cell: what was measured, what was predicted. */
async function tableRows(opened: MeasuringPage): Promise<string[][]> {
  return opened.page.locator("#table tbody tr").evaluateAll((rows) => rows.map((row) => [...row.children].map((cell) => cell.firstChild?.textContent ?? "")));
}

describe("from the button to the files", () => {
  test("progress grows, the chart appears while it is measured, and what is saved is what is shown", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    const { page } = opened;
    await opened.chooseLittle();
    await page.evaluate(() => {
      const kept = globalThis as unknown as { told: string[]; values: number[] };
      [kept.told, kept.values] = [[], []];
      const told = document.querySelector("#told")!;
      new MutationObserver(() => kept.told.push(told.textContent ?? "")).observe(told, { childList: true });
      const bar = document.querySelector("progress")!;
      new MutationObserver(() => kept.values.push(bar.value)).observe(bar, { attributes: true, attributeFilter: ["value"] });
    });
    await opened.start();
    await page.getByRole("progressbar").waitFor();
    await opened.untilGrowing();
    expect(await page.locator("#chart svg[role=img]").count()).toBe(1);
    expect(await page.getByRole("progressbar").isVisible()).toBe(true);
    expect(await opened.text("time-left")).toMatch(/^\d+ %, (about \d+ s|a moment) left$/);
    await opened.untilDone();

    const { told, values } = await page.evaluate(() => {
      const { told, values } = globalThis as unknown as { told: string[]; values: number[] };
      return { told, values };
    });
    expect(values.length).toBeGreaterThan(5);
    expect(values.toSorted((a, b) => a - b)).toEqual(values);
    expect(told.length).toBeLessThanOrEqual(3);
    expect(told.at(-1)).toMatch(/^Done\. /);

    const results = await opened.saved("Save the results");
    const crossover = results.content as Crossover;
    expect(results.name).toMatch(today);
    expect(crossover.layout).toEqual({ width: 160, height: 120, channels: 4, sample: "u8" });
    expect(crossover.rows.length).toBeGreaterThan(2);
    expect(await opened.text("verdict")).toBe(answerSentence(crossover));
    const shown = await tableRows(opened);
    const methods = (["direct", "separable", "running-sum", "fft"] as const).filter((method) =>
      crossover.rows.some((row) => (row.milliseconds[method] ?? row.predicted[method]) !== undefined),
    );
    expect(shown.map((row) => row.slice(0, methods.length + 1))).toEqual(
      crossover.rows.map(({ size, milliseconds }) => [
        `${size}×${size}`,
        ...methods.map((method) => (milliseconds[method] === undefined ? "–" : threeDigits(milliseconds[method]))),
      ]),
    );

    const { name, content } = await opened.saved("Save the profile");
    expect(name).toMatch(today);
    const engine = await createEngine({ profile: content as HardwareProfile });
    expect(engine.profile.nanoseconds).toEqual((content as HardwareProfile).nanoseconds);
    engine.dispose();

    const report = await opened.savedText("Save a report");
    expect(report.name).toMatch(/^tapwise-report-\d{4}-\d{2}-\d{2}-160x120x4-u8\.html$/);
    expect(report.text).toMatch(/^<!doctype html>/);
    expect(report.text).toContain(crossover.host);
    expect(report.text).toContain("<svg");

    expect(opened.complaints).toEqual([]);
    await opened.close();
  });

  test("once loaded it needs no network and asks for nothing", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.page.context().setOffline(true);
    await opened.measureLittle();
    expect((await opened.text("verdict")).length).toBeGreaterThan(30);
    expect(((await opened.saved("Save the results")).content as Crossover).rows.length).toBeGreaterThan(2);
    expect(opened.requests).toEqual([house.address]);
    expect(opened.complaints).toEqual([]);
    await opened.close();
  });

  test("its policy lets it reach no address", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    const reached = await opened.page.evaluate(() =>
      fetch(location.href).then(
        () => "reached",
        () => "refused",
      ),
    );
    expect(reached).toBe("refused");
    await opened.close();
  });

  test("a page from the network says why it has one thread and a coarser clock, and measures all the same", async () => {
    const opened = await MeasuringPage.open(house.browser, house.networkAddress);
    expect(await opened.text("surroundings")).toMatch(/ticks every 1\d\d µs.*one thread.*http:\/\//);
    expect(await opened.page.getByLabel("Work on").isVisible()).toBe(false);
    await opened.measureLittle();
    expect(((await opened.saved("Save the results")).content as Crossover).threads).toBe(1);
    await opened.close();
  });

  test("an isolated page of a device with four processors offers threads, and measures with them", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address, {}, () => Object.defineProperty(navigator, "hardwareConcurrency", { value: 4 }));
    const choice = opened.page.getByLabel("Work on");
    expect(await choice.locator("option").allInnerTexts()).toEqual(["one thread", "2 threads", "4 threads"]);
    await choice.selectOption("2 threads");
    expect(await opened.text("wanted-words")).toContain("2 threads");
    await opened.measureLittle();
    expect(((await opened.saved("Save the results")).content as Crossover).threads).toBe(2);
    expect(((await opened.saved("Save the profile")).content as HardwareProfile).threads).toBe(2);
    expect(opened.complaints).toEqual([]);
    await opened.close();
  });
});

describe("what goes otherwise", () => {
  test("stopped while the chart grows: what was measured stays, says that it is not all, and can be saved", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.chooseLittle();
    await opened.page.getByLabel("Take").selectOption({ index: 2 });
    await opened.start();
    await opened.untilGrowing();
    await opened.button("Stop").click();
    await opened.untilDone();
    const { content } = await opened.saved("Save the results");
    expect((content as Crossover).notes.join()).toMatch(/Stopped at \d+ %/);
    expect(await opened.text("notes")).toContain("kernel sizes are missing");
    expect(await opened.text("told")).toMatch(/^Stopped\./);
    await opened.close();
  });

  test("a worker that does not hear is ended, and what it found before stays", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.page.evaluate(() => {
      const script = document.querySelector("#measurer")!;
      const deaf =
        'const listen = addEventListener; globalThis.addEventListener = (kind, heard) => listen(kind, (event) => event.data.kind !== "stop" && heard(event));';
      script.textContent = deaf + script.textContent;
    });
    await opened.chooseLittle();
    await opened.page.getByLabel("Take").selectOption({ index: 2 });
    await opened.start();
    await opened.untilGrowing();
    await opened.button("Stop").click();
    await opened.untilDone();
    expect(await opened.text("notes")).toMatch(/Stopped at \d+ %/);
    await opened.close();
  });

  test("stopped in the first step: the page is as before, and the button has the focus", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.start();
    await opened.button("Stop").click();
    await opened.page.locator("#underway").waitFor({ state: "hidden" });
    expect(await opened.page.locator("#findings").isVisible()).toBe(false);
    expect(await opened.page.evaluate(() => document.activeElement?.id)).toBe("measure");
    expect(await opened.page.title()).toBe("Measure this device – tapwise");
    await opened.close();
  });

  test("a second measurement that is stopped early leaves the first one's results", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.measureLittle();
    const before = [await opened.text("verdict"), await tableRows(opened)];
    await opened.start();
    await opened.button("Stop").click();
    await opened.page.locator("#underway").waitFor({ state: "hidden" });
    expect([await opened.text("verdict"), await tableRows(opened)]).toEqual(before);
    await opened.close();
  });

  test("a page that was hidden meanwhile says so in the results", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.chooseLittle();
    await opened.page.getByLabel("Take").selectOption({ index: 2 });
    await opened.start();
    await opened.untilGrowing();
    await opened.page.evaluate(async () => {
      const pretend = (state: string): void => {
        Object.defineProperty(document, "visibilityState", { value: state, configurable: true });
        document.dispatchEvent(new Event("visibilitychange"));
      };
      pretend("hidden");
      await new Promise((resolve) => setTimeout(resolve, 400));
      pretend("visible");
    });
    await opened.button("Stop").click();
    await opened.untilDone();
    expect(await opened.text("notes")).toMatch(/hidden for \d\.\d s while it measured/);
    expect(((await opened.saved("Save the results")).content as Crossover).notes.join()).toContain("The page was hidden");
    await opened.close();
  });

  test("a browser that makes no workers is told of in words, and nothing hangs", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.page.evaluate(() => {
      delete (globalThis as { Worker?: unknown }).Worker;
    });
    await opened.start();
    await opened.page.getByRole("alert").filter({ hasText: "ended early" }).waitFor();
    expect(await opened.text("trouble")).toContain("This browser makes no workers here");
    expect(await opened.button("Measure again").isEnabled()).toBe(true);
    await opened.close();
  });

  test("too little memory is told of in words", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.page.evaluate(() => {
      const script = document.querySelector("#measurer")!;
      const refusing = 'globalThis.WebAssembly.instantiate = () => Promise.reject(new RangeError("Out of memory"));';
      script.textContent = refusing + script.textContent;
    });
    await opened.start();
    await opened.page.getByRole("alert").filter({ hasText: "ended early" }).waitFor();
    expect(await opened.text("trouble")).toContain("This device has too little memory for that picture (Out of memory). Choose a smaller one.");
    await opened.close();
  });

  test("WebAssembly that a browser forbids is told of in the engine's words", async () => {
    const opened = await MeasuringPage.open(house.browser, house.address);
    await opened.page.evaluate(() => {
      const script = document.querySelector("#measurer")!;
      script.textContent = `delete globalThis.WebAssembly;${script.textContent}`;
    });
    await opened.start();
    await opened.page.getByRole("alert").filter({ hasText: "ended early" }).waitFor();
    expect(await opened.text("trouble")).toContain("WebAssembly");
    await opened.close();
  });
});
