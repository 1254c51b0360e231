import { readFile } from "node:fs/promises";
import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { join, normalize } from "node:path";
import { fileURLToPath } from "node:url";

const root = fileURLToPath(new URL("../", import.meta.url));

/** Isolated, so that the page's clock ticks in microseconds; nothing may be kept from one page to the next. */
const headers = { "Cross-Origin-Opener-Policy": "same-origin", "Cross-Origin-Embedder-Policy": "require-corp", "Cache-Control": "no-store" };

/** Serves an empty page at / and every file of the repository by its path. */
export async function serveRepository(): Promise<{ address: string; stop(): void }> {
  const server = createServer(async (request, response) => {
    const path = new URL(request.url ?? "/", "http://localhost").pathname;
    if (path === "/") return void response.writeHead(200, { ...headers, "Content-Type": "text/html" }).end("<!doctype html><title>Measuring</title>");
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
