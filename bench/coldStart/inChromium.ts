import { readFile } from "node:fs/promises";
import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { join, normalize } from "node:path";
import { fileURLToPath } from "node:url";
import { chromium } from "playwright-core";
import { chromiumLaunchOptions } from "../../.build/chromium.mjs";
import type { ColdStart, SampleOfStart } from "./coldStart.js";

const root = fileURLToPath(new URL("../../", import.meta.url));

/** Isolated, so that the page's clock ticks in microseconds; nothing may be kept from one page to the next. */
const headers = { "Cross-Origin-Opener-Policy": "same-origin", "Cross-Origin-Embedder-Policy": "require-corp", "Cache-Control": "no-store" };

async function serve(): Promise<{ address: string; stop(): void }> {
  const server = createServer(async (request, response) => {
    const path = new URL(request.url ?? "/", "http://localhost").pathname;
    if (path === "/") return void response.writeHead(200, { ...headers, "Content-Type": "text/html" }).end("<!doctype html><title>Cold start</title>");
    try {
      const contents = await readFile(join(root, normalize(path)));
      response.writeHead(200, { ...headers, "Content-Type": "text/javascript" }).end(contents);
    } catch {
      response.writeHead(404, headers).end();
    }
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const { port } = server.address() as AddressInfo;
  return { address: `http://127.0.0.1:${port}`, stop: () => server.close() };
}

/** Cold starts in pages of one browser, each in a context of its own that has no cache and no compiled code. */
export async function openChromium(
  executablePath: string,
): Promise<{ version: string; start(sample: SampleOfStart): Promise<ColdStart>; close(): Promise<void> }> {
  const [browser, server] = await Promise.all([chromium.launch(chromiumLaunchOptions(executablePath)), serve()]);
  return {
    version: browser.version(),
    async start(sample) {
      const context = await browser.newContext();
      try {
        const page = await context.newPage();
        await page.goto(server.address);
        return await page.evaluate(async (wanted) => {
          const { measureColdStart } = (await import(/* @vite-ignore */ `${location.origin}/bench/coldStart/parts.js`)) as {
            measureColdStart(address: string, sample: string): Promise<ColdStart>;
          };
          return measureColdStart("/dist/index.js", wanted);
        }, sample);
      } finally {
        await context.close();
      }
    },
    async close() {
      await browser.close();
      server.stop();
    },
  };
}
