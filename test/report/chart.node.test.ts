import { describe, expect, test } from "vitest";
import { crossoverChart } from "../../src/report/chart.js";
import { nodeDocument } from "../../src/report/nodeDocument.js";
import { answerSentence } from "../../src/report/sentences.js";
import { sampleCrossover } from "./samples.js";

const draw = (crossover = sampleCrossover(), width = 800, earlier?: typeof crossover): SVGSVGElement =>
  crossoverChart(crossover, { document: nodeDocument(), width, ...(earlier === undefined ? {} : { earlier }) });

const textsOf = (svg: SVGSVGElement): string[] => [...svg.querySelectorAll("text")].map(({ textContent }) => textContent ?? "");
const count = (svg: SVGSVGElement, selector: string): number => svg.querySelectorAll(selector).length;

describe("a line for each method", () => {
  test("measured and predicted, with a mark at each size, and its name", () => {
    const crossover = sampleCrossover();
    const svg = draw(crossover);
    for (const [method, name] of [
      ["direct", "direct"],
      ["separable", "separable"],
      ["fft", "FFT"],
    ] as const) {
      expect(count(svg, `.measured.${method} path`)).toBe(1);
      expect(count(svg, `.predicted.${method} path`)).toBe(1);
      expect(count(svg, `.quartiles.${method} path`)).toBe(1);
      expect(count(svg, `.dots.${method} title`)).toBe(crossover.rows.length);
      expect(textsOf(svg)).toContain(name);
    }
    expect(count(svg, ".measured")).toBe(3);
  });

  test("methods differ in the shape of their marks, not only in colour", () => {
    const svg = draw(sampleCrossover({ methods: ["direct", "separable", "running-sum", "fft"] }));
    const shapes = [...svg.querySelectorAll(".dots")].map(
      (group) => (group.querySelector("path") ?? group.querySelector("circle"))?.getAttribute("d") ?? "circle",
    );
    expect(new Set(shapes).size).toBe(4);
    expect(svg.querySelector(".predicted")?.getAttribute("stroke-dasharray")).toBe("5 4");
    expect(svg.querySelector(".measured")?.hasAttribute("stroke-dasharray")).toBe(false);
  });
});

describe("crossings are marked", () => {
  test("each with a ring and a label, the leading ones with a strip", () => {
    const crossover = sampleCrossover();
    const svg = draw(crossover);
    expect(count(svg, ".crossing title")).toBe(crossover.crossings.length);
    expect(count(svg, ".interval rect")).toBe(crossover.crossings.filter(({ leading }) => leading).length);
    expect(textsOf(svg)).toContain("FFT faster than separable from 51×51 (31…63)");
    expect(textsOf(draw(crossover, 360))).toContain("FFT from 51×51 (31…63)");
  });

  test("the ring stands on its rule, between the two lines that meet there", () => {
    const svg = draw(sampleCrossover({ methods: ["direct", "fft"] }));
    const points = (selector: string): [number, number][] =>
      [
        ...svg
          .querySelector(`${selector} path`)!
          .getAttribute("d")!
          .matchAll(/([\d.]+),([\d.]+)/g),
      ].map(([, x, y]) => [Number(x), Number(y)]);
    const ring = svg.querySelector(".crossing circle")!;
    const [x, y] = [Number(ring.getAttribute("cx")), Number(ring.getAttribute("cy"))];
    const heights = [".measured.direct", ".measured.fft"].map((selector) => {
      const line = points(selector);
      const after = line.findIndex(([at]) => at > x);
      const [[x0, y0], [x1, y1]] = [line[after - 1]!, line[after]!];
      return y0 + ((x - x0) / (x1 - x0)) * (y1 - y0);
    });
    // Paths are written with three decimals.
    expect(points(".crossing-rule")[0]![0]).toBeCloseTo(x, 2);
    expect((heights[0]! + heights[1]!) / 2).toBeCloseTo(y, 2);
    expect(Math.abs(heights[0]! - heights[1]!)).toBeLessThan(20);
  });
});

describe("what there is, is drawn", () => {
  test("no size: axes without times, and a word", () => {
    const svg = draw(sampleCrossover({ sizes: [] }));
    expect(textsOf(svg)).toContain("No kernel size has been measured yet");
    expect(textsOf(svg).filter((text) => text.endsWith("ms"))).toEqual([]);
  });

  test("one size: a mark a method, and no line that could mean anything", () => {
    const svg = draw(sampleCrossover({ sizes: [9] }));
    expect(count(svg, ".dots title")).toBe(3);
    expect(textsOf(svg)).toContain("9×9");
  });

  test("sizes that were not timed are only predicted", () => {
    const svg = draw(sampleCrossover({ untimedFrom: { direct: 31 } }));
    expect(count(svg, ".dots.direct title")).toBe(8);
    expect(count(svg, ".dots.fft title")).toBe(13);
  });

  test("numbers that a logarithm has no place for are left out", () => {
    const crossover = sampleCrossover();
    crossover.rows[3]!.milliseconds = { direct: NaN, separable: -1, fft: 0 };
    crossover.rows[4]!.predicted = { direct: Infinity };
    const svg = draw(crossover);
    expect(svg.outerHTML).not.toMatch(/NaN|Infinity/);
    expect(count(svg, ".dots title")).toBe(3 * 12);
  });

  test("an earlier measurement lies behind", () => {
    const svg = draw(sampleCrossover(), 800, sampleCrossover({ slower: 2 }));
    expect(count(svg, ".earlier path")).toBe(3);
    expect(svg.outerHTML.indexOf("earlier direct")).toBeLessThan(svg.outerHTML.indexOf("measured direct"));
    expect(textsOf(svg)).toContain("measured earlier");
  });

  test("sizes that have no room are not named", () => {
    const named = (width: number): (string | null)[] =>
      [...draw(sampleCrossover({ sizes: [1, 3, 9, 31, 127, 511, 1023] }), width).querySelectorAll(".sizes text")].map(({ textContent }) => textContent);
    expect(named(1200)).toEqual(["3×3", "5×5", "9×9", "15×15", "31×31", "63×63", "127×127", "255×255", "511×511", "1023×1023"]);
    expect(named(340).length).toBeLessThan(8);
    expect(named(340).at(-1)).toBe("1023");
  });

  test.each([320, 360, 620, 1200])("at %i pixels everything lies inside", (width) => {
    const svg = draw(sampleCrossover({ methods: ["direct", "separable", "running-sum", "fft"] }), width);
    const height = Number(svg.getAttribute("height"));
    const places = [...svg.outerHTML.matchAll(/<text[^>]*transform="translate\(([-\d.]+),([-\d.]+)\)"/g)].map(([, x, y]) => [Number(x), Number(y)] as const);
    expect(places.length).toBeGreaterThan(20);
    for (const [x, y] of places) expect(x >= 0 && x <= width && y >= 0 && y <= height).toBe(true);
  });
});

describe("the drawing is one image to a screen reader, and brings nothing", () => {
  test("its alternative is the answer", () => {
    const svg = draw();
    expect(svg.getAttribute("role")).toBe("img");
    expect(svg.getAttribute("aria-label")).toContain(answerSentence(sampleCrossover()));
    expect(count(svg, "[aria-label],[aria-hidden]")).toBe(0);
  });

  test("it has no style, script, identifier or address", () => {
    expect(count(draw(), "style,script,image,use,[id],[style],[href]")).toBe(0);
  });
});
