import { afterAll, beforeAll, describe, expect, test } from "vitest";
import type { HardwareProfile } from "../../src/index.js";
import type { Crossover } from "../../src/measure/index.js";
import { MeasuringPage } from "./measuringPage.js";
import { openPageHouse, type PageHouse } from "./pageHouse.js";

let house: PageHouse;
let opened: MeasuringPage;
let results: Crossover;
let profile: HardwareProfile;

/** One measurement serves all: no test here may change it. */
beforeAll(async () => {
  house = await openPageHouse();
  opened = await MeasuringPage.open(house.browser, house.address);
  await opened.measureLittle();
  results = (await opened.saved("Save the results")).content as Crossover;
  profile = (await opened.saved("Save the profile")).content as HardwareProfile;
}, 240_000);
afterAll(() => house?.close());

const onShow = async (): Promise<unknown[]> => [await opened.text("verdict"), await opened.text("table"), (await opened.saved("Save the results")).content];

/** The same results, as if everything had taken that many times as long. */
function slower(factor: number, change: Partial<Crossover> = {}): Crossover {
  const times = <T extends Record<string, number | [number, number]>>(given: T): T =>
    Object.fromEntries(Object.entries(given).map(([method, time]) => [method, Array.isArray(time) ? time.map((one) => factor * one) : factor * time])) as T;
  const rows = results.rows.map((row) => ({ ...row, milliseconds: times(row.milliseconds), quartiles: times(row.quartiles), predicted: times(row.predicted) }));
  return { ...results, rows, date: "2025-03-04T10:00:00.000Z", host: "another device", ...change };
}

async function comparedWith(earlier: Crossover): Promise<string> {
  await opened.choose("earlier.json", JSON.stringify(earlier));
  await opened.page.getByText("Compared with “earlier.json”").waitFor();
  return opened.text("difference");
}

describe("earlier results", () => {
  test("are drawn behind the chart, and a sentence says what differs", async () => {
    expect(await opened.page.locator("#chart .earlier").count()).toBe(0);
    // A thousand times as slow: no noise of a busy machine reaches that far.
    const words = await comparedWith(slower(1000));
    expect(words).toContain("Every method is 1000 times as fast as on another device, 4 March 2025");
    expect(await opened.page.locator("#chart .earlier").count()).toBeGreaterThan(0);
    expect(await opened.text("told")).toContain(words);
  });

  test("of the same times are called as fast", async () => {
    expect(await comparedWith(slower(1))).toContain("Every method is as fast as on another device");
  });

  test("of another picture or another number of threads are named as such", async () => {
    const words = await comparedWith(slower(1000, { layout: { width: 640, height: 480, channels: 1, sample: "f32" }, threads: 4 }));
    expect(words).toContain("for something else, so read this with care: Small picture, 640 × 480, shades of grey, decimal numbers");
    expect(words).toContain("measured with 4 threads, these with 1");
  });

  test("are taken when dropped anywhere, also as they stand in a larger file", async () => {
    await opened.drop({ name: "dropped.json", content: JSON.stringify({ profile, crossover: slower(1000) }) });
    await opened.page.getByText("Compared with “dropped.json”").waitFor();
    expect(await opened.text("difference")).toContain("1000 times as fast");
  });

  test("are let go of, and the page is as before", async () => {
    await comparedWith(slower(2));
    await opened.button("Stop comparing").click();
    expect(await opened.page.locator("#chart .earlier").count()).toBe(0);
    expect(await opened.page.locator("#difference").isVisible()).toBe(false);
    expect(await opened.page.evaluate(() => document.activeElement?.id)).toBe("choose-earlier");
  });

  test("that were chosen before anything was measured wait for the chart", async () => {
    const early = await MeasuringPage.open(house.browser, house.address);
    await early.choose("earlier.json", JSON.stringify(slower(1000)));
    await early.page.getByText("Compared with “earlier.json”").waitFor();
    expect(await early.page.locator("#difference").isVisible()).toBe(false);
    await early.measureLittle();
    expect(await early.text("difference")).toContain("times as fast");
    expect(await early.page.locator("#chart .earlier").count()).toBeGreaterThan(0);
    await early.close();
  });
});

/** Results with something in them that cannot be. */
function damaged(damage: (copy: { rows: Record<string, unknown>[] } & Record<string, unknown>) => void): string {
  const copy = structuredClone(results) as unknown as { rows: Record<string, unknown>[] } & Record<string, unknown>;
  damage(copy);
  return JSON.stringify(copy);
}

describe("files that do not fit change nothing and are told of in words", () => {
  const unfit: [name: string, content: () => string, words: string][] = [
    ["empty.json", () => "", "“empty.json” is empty."],
    ["letter.txt", () => "Dear herbarium, …", "does not hold JSON"],
    ["photo.json", () => "x".repeat(2_500_000), "has 2.5 MB; results take a few kB, so it was not read"],
    ["profile.json", () => JSON.stringify(profile), "is a profile, the costs of a device"],
    ["list.json", () => "[1, 2, 3]", "no results of this page"],
    ["null.json", () => "null", "no results of this page"],
    ["package.json", () => JSON.stringify({ name: "anything", rows: [] }), "no results of this page"],
    ["time.json", () => damaged((copy) => (copy.rows[2]!["milliseconds"] = { fft: "fast" })), "is damaged: row 3 has no usable time"],
    ["negative.json", () => damaged((copy) => (copy.rows[1]!["milliseconds"] = { fft: -1 })), "is damaged: row 2 has no usable time"],
    ["zero.json", () => damaged((copy) => (copy.rows[0]!["milliseconds"] = { fft: 0 })), "is damaged: row 1 has a time of 0"],
    ["huge.json", () => damaged((copy) => (copy.rows[0]!["milliseconds"] = { fft: 1e300 })), "is damaged: row 1 has no usable time"],
    ["none.json", () => damaged((copy) => (copy.rows[0]!["milliseconds"] = {})), "is damaged: row 1 has no usable time"],
    ["method.json", () => damaged((copy) => (copy.rows[0]!["fastest"] = "constructor")), "is damaged: row 1 has no known method"],
    ["size.json", () => damaged((copy) => (copy.rows[0]!["size"] = null)), "is damaged: row 1 has no usable kernel size"],
    [
      "layout.json",
      () => damaged((copy) => (copy["layout"] = { width: 1, height: 1, channels: 5, sample: "u8" })),
      "the layout has no known number of channels",
    ],
    ["crossing.json", () => damaged((copy) => (copy["crossings"] = [{ from: "fft", to: "fft" }])), "crossing 1 has no usable kernel size"],
    ["many.json", () => damaged((copy) => (copy.rows = Array.from({ length: 1001 }, () => copy.rows[0]!))), "has 1001 rows"],
  ];

  test.each(unfit)("%s", async (name, content, words) => {
    const before = await onShow();
    await opened.drop({ name, content: content() });
    const alert = opened.page.getByRole("alert").filter({ hasText: `“${name}”` });
    await alert.waitFor();
    expect(await alert.innerText()).toContain(words);
    expect(await alert.innerText()).toContain("Nothing on this page has changed.");
    expect(await onShow()).toEqual(before);
  });

  test("several at once", async () => {
    await opened.drop({ name: "one.json", content: "{}" }, { name: "two.json", content: "{}" });
    await opened.page.getByRole("alert").filter({ hasText: "came with 1 more; give one file at a time" }).waitFor();
  });

  test("names and texts of a file are shown as text, whatever they hold", async () => {
    const name = "<img src=x onerror=alert(1)>.json";
    await opened.drop({ name, content: JSON.stringify(slower(1000, { host: "<b>bold</b>", notes: ["<script>1</script>"] })) });
    await opened.page.getByText(`Compared with “${name}”`).waitFor();
    expect(await opened.text("difference")).toContain("<b>bold</b>");
    expect(await opened.page.locator("#comparing img, #difference b").count()).toBe(0);
    expect(opened.complaints).toEqual([]);
  });
});

describe("between visits", () => {
  test("a profile that is remembered saves the first step; unticked, it is forgotten", async () => {
    const visit = await MeasuringPage.open(house.browser, house.address);
    const { page } = visit;
    const box = page.getByRole("checkbox", { name: /Remember in this browser/ });
    await box.check();
    await visit.measureLittle();
    const first = (await visit.saved("Save the profile")).content;
    await page.reload();
    expect(await box.isChecked()).toBe(true);
    expect(await visit.text("remembered")).toMatch(/^Kept: measured on /);
    await visit.chooseLittle();
    await visit.start();
    await visit.untilGrowing();
    expect(await visit.text("step")).toBe("Filters of growing size");
    await visit.untilDone();
    expect((await visit.saved("Save the profile")).content).toEqual(first);
    await box.uncheck();
    await page.reload();
    expect(await box.isChecked()).toBe(false);
    expect(await page.evaluate(() => localStorage.length)).toBe(0);
    await visit.close();
  });

  test("a kept profile that is damaged is measured anew", async () => {
    const visit = await MeasuringPage.open(house.browser, house.address);
    await visit.page.evaluate(() => localStorage.setItem("measured on the page: tapwise profile 2, simd, 1", '{"version":2,"nanoseconds":{"run":"NaN"}}'));
    await visit.page.reload();
    await visit.chooseLittle();
    await visit.start();
    await visit.page.getByText("Step 1 of 2").waitFor();
    await visit.untilDone();
    expect(visit.complaints).toEqual([]);
    await visit.close();
  });
});
