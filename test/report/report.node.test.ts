import { operationWords } from "../../src/measure/index.js";
import { describe, expect, test } from "vitest";
import { parseHTML } from "linkedom";
import { capitalised } from "../../src/report/methodNames.js";
import { nodeDocument } from "../../src/report/nodeDocument.js";
import { reportHtml } from "../../src/report/report.js";
import { answerSentence } from "../../src/report/sentences.js";
import { sampleCrossover, sampleProfile } from "./samples.js";

const crossover = sampleCrossover();
const html = reportHtml({ crossover, profile: sampleProfile(), document: nodeDocument() });
const page = parseHTML(html).document;
const texts = (selector: string): string[] => [...page.querySelectorAll(selector)].map(({ textContent }) => textContent ?? "");

describe("the report tells everything", () => {
  test("the answer comes first", () => {
    const [answer, certainty] = answerSentence(crossover).replace(/\.$/, "").split("; ") as [string, string];
    expect(texts("header .answer")).toEqual([`${answer}.`]);
    expect(texts("header .certainty")).toEqual([`${capitalised(certainty)}.`]);
  });

  test("headings go down one level at a time from one h1", () => {
    const levels = [...page.querySelectorAll("h1,h2,h3,h4")].map(({ tagName }) => Number(tagName.slice(1)));
    expect(levels.filter((level) => level === 1)).toHaveLength(1);
    for (let k = 1; k < levels.length; k++) expect(levels[k]! - levels[k - 1]!).toBeLessThanOrEqual(1);
  });

  test("the table has a row for every size, headed by it, and says what its columns are", () => {
    expect(texts(".sizes tbody th[scope=row]")).toEqual(crossover.rows.map(({ size }) => `${size}×${size}`));
    expect(texts(".sizes th[scope=colgroup]")).toEqual(["direct", "separable", "FFT"]);
    expect(texts(".sizes caption")).toHaveLength(1);
    for (const cell of page.querySelectorAll("thead th")) expect(cell.getAttribute("scope")).toMatch(/^col(group)?$/);
  });

  test("prices stand with their spread, or say that they have none; checks with how far they were off", () => {
    const prices = [...page.querySelectorAll("details table")][0]!;
    expect([...prices.querySelectorAll("tbody th")].map(({ textContent }) => textContent)).toEqual(
      Object.keys(sampleProfile().nanoseconds).map((name) => operationWords[name as keyof typeof operationWords] ?? name),
    );
    expect(prices.textContent).toContain("± 0.4 %");
    expect(prices.textContent).toContain("taken over in proportion");
    expect(html).toContain("+5.0 %");
    expect(html).toContain("−6.7 %");
  });

  test("every identifier that is named exists once", () => {
    const named = [...page.querySelectorAll("[aria-labelledby]")].map((element) => element.getAttribute("aria-labelledby")!);
    expect(named.length).toBeGreaterThan(3);
    for (const id of named) expect(page.querySelectorAll(`[id="${id}"]`)).toHaveLength(1);
  });
});

describe("the report needs nothing else and runs nothing", () => {
  test("no address leads out, and nothing is loaded", () => {
    const addresses = html.replaceAll('xmlns="http://www.w3.org/2000/svg"', "").match(/https?:|\/\/|url\(|@import|src=|href=|data:/g);
    expect(addresses).toBeNull();
    expect(page.querySelectorAll("script,link,iframe,img,object,embed,base,form")).toHaveLength(0);
  });

  test("its policy forbids all but its own style", () => {
    expect(page.querySelector("meta[http-equiv]")?.getAttribute("content")).toBe(
      "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; form-action 'none'",
    );
  });

  test("nothing moves", () => {
    expect(html).not.toMatch(/animation|transition|<animate|scroll-behavior/);
  });
});

describe("strings from files stay text", () => {
  const attack = `"><script>alert(1)</script><img src=x onerror='alert(2)'>&amp;`;
  const profile = {
    ...sampleProfile(),
    host: attack,
    date: attack,
    nanoseconds: { [attack]: 1 },
    spread: { [attack]: 0.1 },
    notes: [attack],
    checks: [{ problem: attack, method: "fft" as const, predicted: 1, measured: 1 }],
    verdicts: [{ shape: attack, method: "fft" as const, milliseconds: { fft: 1 }, date: attack }],
  };
  const hostile = { ...crossover, host: attack, date: attack, profile: attack, notes: [attack] };
  const written = reportHtml({ crossover: hostile, profile, document: nodeDocument(), earlier: hostile });

  test("no element and no attribute comes of them", () => {
    const { document } = parseHTML(written);
    expect(document.querySelectorAll("script,img")).toHaveLength(0);
    expect(
      [...document.querySelectorAll("*")].flatMap((element) => [...element.attributes].map(({ name }) => name)).filter((name) => name.startsWith("on")),
    ).toEqual([]);
    expect(written).not.toContain("<script");
  });

  test("they are read as they were written", () => {
    const { document } = parseHTML(written);
    expect(document.querySelector("dd")?.textContent).toBe(attack);
    expect(document.querySelector("title")?.textContent).toBe(`Time against kernel size on ${attack}`);
  });
});
