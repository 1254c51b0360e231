import { readFile } from "node:fs/promises";
import type { Browser, BrowserContextOptions, Download, Page } from "playwright-core";

/** How long a measurement of the shortest kind may take on a busy machine. */
const patience = 120_000;

/** The page that measures, as somebody uses it: everything by names that are read and seen. */
export class MeasuringPage {
  readonly requests: string[] = [];
  readonly complaints: string[] = [];

  private constructor(
    readonly page: Page,
    readonly address: string,
  ) {
    page.setDefaultTimeout(patience);
    page.on("request", (request) => {
      if (/^https?:/.test(request.url())) this.requests.push(request.url());
    });
    page.on("pageerror", (error) => this.complaints.push(error.message));
    page.on("console", (message) => this.complaints.push(message.text()));
  }

  /** @param before runs in the page before its own script */
  static async open(browser: Browser, address: string, options: BrowserContextOptions = {}, before?: () => unknown): Promise<MeasuringPage> {
    const context = await browser.newContext({ viewport: { width: 1100, height: 900 }, ...options });
    if (before !== undefined) await context.addInitScript(before);
    const opened = new MeasuringPage(await context.newPage(), address);
    await opened.page.goto(address);
    return opened;
  }

  async close(): Promise<void> {
    await this.page.context().close();
  }

  button(name: string | RegExp) {
    return this.page.getByRole("button", { name, exact: typeof name === "string" });
  }

  /** Chooses the smallest picture and the shortest measurement. */
  async chooseLittle(): Promise<void> {
    const choices = this.page.locator("#choices");
    if ((await choices.getAttribute("open")) === null) await choices.locator("summary").click();
    await this.page.getByLabel("Picture").selectOption({ index: 0 });
    await this.page.getByLabel("Take").selectOption({ index: 0 });
  }

  async start(): Promise<void> {
    await this.button(/^Measure/).click();
  }

  async untilDone(): Promise<void> {
    await this.page.getByRole("heading", { name: "What was found", exact: true }).waitFor();
    await this.page.locator("#underway").waitFor({ state: "hidden" });
  }

  async measureLittle(): Promise<void> {
    await this.chooseLittle();
    await this.start();
    await this.untilDone();
  }

  /** Waits until the chart shows a first size, while the measurement goes on. */
  async untilGrowing(): Promise<void> {
    await this.page.getByRole("heading", { name: "What is found so far" }).waitFor();
    await this.page.locator("#table tbody tr").first().waitFor();
  }

  text(id: string): Promise<string> {
    return this.page.locator(`#${id}`).innerText();
  }

  /** What a button saves. A busy browser now and then loses the news of a download: then the button is pressed again, as people would. */
  async #download(button: string): Promise<Download> {
    for (let attempt = 1; attempt < 3; attempt++) {
      const saved = this.page.waitForEvent("download", { timeout: 20_000 }).catch(() => undefined);
      await this.button(button).click();
      const download = await saved;
      if (download) return download;
    }
    const [download] = await Promise.all([this.page.waitForEvent("download"), this.button(button).click()]);
    return download;
  }

  /** The file that a button saves: its name and its text. */
  async savedText(button: string): Promise<{ name: string; text: string }> {
    const download = await this.#download(button);
    return { name: download.suggestedFilename(), text: await readFile(await download.path(), "utf8") };
  }

  /** The same of a JSON file: what it holds. */
  async saved(button: string): Promise<{ name: string; content: unknown }> {
    const { name, text } = await this.savedText(button);
    return { name, content: JSON.parse(text) };
  }

  async choose(name: string, content: string | Buffer): Promise<void> {
    const [chooser] = await Promise.all([this.page.waitForEvent("filechooser"), this.button(/^Choose/).click()]);
    await chooser.setFiles({ name, mimeType: "application/json", buffer: Buffer.from(content) });
  }

  /** Drops files on the heading, which is no place made for them: any place will do. */
  async drop(...files: { name: string; content: string }[]): Promise<void> {
    const carried = await this.page.evaluateHandle((given) => {
      const transfer = new DataTransfer();
      for (const { name, content } of given) transfer.items.add(new File([content], name, { type: "application/json" }));
      return transfer;
    }, files);
    await this.page.dispatchEvent("h1", "dragover", { dataTransfer: carried });
    await this.page.dispatchEvent("h1", "drop", { dataTransfer: carried });
  }
}
