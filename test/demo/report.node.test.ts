import { mkdtemp, readFile, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { parseHTML } from "linkedom";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { drawnPlaces, readPhotograph, type DemoImage } from "../../bench/demo/image.js";
import { threeJobs } from "../../bench/demo/jobs.js";
import { drawSheet, sheetHeight, sheetWidth } from "../../bench/demo/sheet/sheet.js";
import { show } from "../../bench/demo/show.js";
import { encodePng } from "../../src/cli/encodePng.js";
import { createEngine, type Engine } from "../../src/index.js";

let engine: Engine;
let folder: string;
beforeAll(async () => {
  engine = await createEngine();
  folder = await mkdtemp(join(tmpdir(), "demo-"));
});
afterAll(async () => {
  engine.dispose();
  await rm(folder, { recursive: true });
});

/** A small drawn sheet, so that a test takes a moment. */
function smallImage(): DemoImage {
  const raster = drawSheet(400);
  return { raster, layout: { width: raster.width, height: raster.height, channels: 3, sample: "u8" }, name: "A small sheet <& co>", notes: [] };
}

describe("the demo's report", () => {
  let html: string;
  let document: Document;
  let told: string;
  let agreed: boolean;
  beforeAll(async () => {
    const lines: string[] = [];
    agreed = await show(engine, smallImage(), folder, (text) => lines.push(text));
    told = lines.join("\n");
    html = await readFile(join(folder, "report.html"), "utf8");
    document = parseHTML(html).document as unknown as Document;
  }, 60_000);

  it("needs nothing from outside: no address but data and places on the page", () => {
    const addresses = [...document.querySelectorAll("[src], [href]")].map((element) => element.getAttribute("src") ?? element.getAttribute("href") ?? "");
    expect(addresses.length).toBeGreaterThan(0);
    for (const address of addresses) expect(address).toMatch(/^(data:image\/png;base64,|#)/);
    expect(html).not.toMatch(/https?:|url\(|@import|<script|<link|<iframe/);
  });

  it("tells for each job the choice, the reason, and every method with figures or a refusal", () => {
    for (const job of threeJobs()) {
      const section = document.getElementById(job.file)!;
      const explanation = engine.explain(job.kernel, { width: 400, height: 300, channels: 3, sample: "u8" }, job.options);
      const text = section.textContent!;
      expect(text).toContain(explanation.because);
      expect(text).toContain(job.title);
      for (const { method, refused } of explanation.candidates) {
        expect(text).toContain(refused ?? method);
        expect(told).toContain(refused ?? method);
      }
      const timed = explanation.candidates.filter(({ refused }) => refused === undefined);
      expect(section.querySelectorAll(`table[aria-labelledby="${job.file}-times"] tbody tr`)).toHaveLength(timed.length);
    }
  });

  it("draws a mark for each measured method in both charts", () => {
    const layout = { width: 400, height: 300, channels: 3, sample: "u8" } as const;
    const timed = threeJobs().flatMap((job) => engine.explain(job.kernel, layout, job.options).candidates.filter(({ refused }) => refused === undefined));
    for (const chart of document.querySelectorAll(".chart")) expect(chart.querySelectorAll("svg circle")).toHaveLength(timed.length);
    expect(document.querySelectorAll(".chart")).toHaveLength(2);
  });

  it("shows crops before and after, and every picture has words", () => {
    for (const job of threeJobs()) expect(document.querySelectorAll(`#${job.file} img.crop`).length).toBeGreaterThanOrEqual(2);
    for (const image of document.querySelectorAll("img")) expect(image.getAttribute("alt")!.length).toBeGreaterThan(10);
    for (const chart of document.querySelectorAll('[role="img"]')) expect(chart.getAttribute("aria-label")).toMatch(/predicted .* measured/);
  });

  it("comes with the verdict that all methods agreed", () => {
    expect(agreed).toBe(true);
    expect(told).toContain("agree within their bounds");
    expect(html).not.toContain("broken");
  });

  it("names the machine, the runtime and the date, and escapes what it is given", () => {
    const machine = document.getElementById("machine")!.textContent!;
    expect(machine).toContain(`Node ${process.versions.node}`);
    expect(machine).toMatch(/\d{4}-\d\d-\d\d \d\d:\d\d UTC/);
    expect(html).toContain("A small sheet &lt;&amp; co&gt;");
  });

  it("writes the image and the three results as PNG files that can be read back", async () => {
    for (const name of ["before", ...threeJobs().map((job) => job.file)]) {
      const { layout } = await readPhotograph(join(folder, `${name}.png`));
      expect(layout, name).toEqual({ width: 400, height: 300, channels: 3, sample: "u8" });
    }
  });
});

describe("a photograph of one's own", () => {
  it("may be 16-bit grey with alpha, and smaller than a crop and than the kernels", async () => {
    const data = Uint16Array.from({ length: 40 * 30 * 2 }, (_, index) => (index % 2 === 1 ? 65535 : (index * 977) % 65536));
    const path = join(folder, "small.png");
    await writeFile(path, encodePng({ data, width: 40, height: 30, channels: 2 }, []));
    const image = await readPhotograph(path);
    expect(image.layout).toEqual({ width: 40, height: 30, channels: 2, sample: "u16" });
    expect(await show(engine, image, folder, () => undefined)).toBe(true);
  });

  it("is refused by name where there is none or it is no PNG", async () => {
    const path = join(folder, "words.png");
    await writeFile(path, "leaves");
    await expect(readPhotograph(path)).rejects.toMatchObject({ code: "invalid-png", fault: "caller" });
    await expect(readPhotograph(join(folder, "missing.png"))).rejects.toMatchObject({ code: "file-unreadable", fault: "caller" });
  });

  it("is not needed: the drawn sheet comes with places that lie inside it", () => {
    for (const { x, y, width, height } of drawnPlaces) {
      expect(x + width).toBeLessThanOrEqual(sheetWidth);
      expect(y + height).toBeLessThanOrEqual(sheetHeight);
    }
  });
});
