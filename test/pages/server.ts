import { readFile } from "node:fs/promises";
import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import { dirname, extname, join, normalize } from "node:path";
import { fileURLToPath } from "node:url";

const here = dirname(fileURLToPath(import.meta.url));
const dist = join(here, "..", "..", "dist");
const mediaTypes: Record<string, string> = { ".html": "text/html; charset=utf-8", ".js": "text/javascript; charset=utf-8" };

/** Content security policies by page: everything from the page's own host, WebAssembly allowed or not. */
const policies: Record<string, string> = {
  "/plain.html": "default-src 'self'; script-src 'self' 'wasm-unsafe-eval'",
  "/blocked.html": "default-src 'self'; script-src 'self'",
  "/threads.html": "default-src 'self'; script-src 'self' 'wasm-unsafe-eval'",
  "/threads-isolated.html": "default-src 'self'; script-src 'self' 'wasm-unsafe-eval'",
  "/threads-blocked.html": "default-src 'self'; script-src 'self' 'wasm-unsafe-eval'; worker-src 'none'",
};

/** What lets a page share memory among threads; all that it loads must be its own or say that it may be embedded. */
const isolation = { "Cross-Origin-Opener-Policy": "same-origin", "Cross-Origin-Embedder-Policy": "require-corp" };

/** The file behind an address: the built package below /dist/, the pages of this folder elsewhere; pages that differ by their policy alone have one text. */
function fileOf(path: string): string {
  if (path.startsWith("/dist/")) return join(dist, normalize(path.slice("/dist".length)));
  if (path.startsWith("/threads") && path.endsWith(".html")) return join(here, "threads.html");
  return join(here, path in policies ? "plain.html" : normalize(path));
}

/** Serves the built package and the pages as they lie on disk, the way any static host would. */
export async function startServer(): Promise<{ address: string; requests: string[]; stop(): Promise<void> }> {
  const requests: string[] = [];
  const server: Server = createServer(async (request, response) => {
    const path = new URL(request.url ?? "/", "http://localhost").pathname;
    if (path === "/favicon.ico") return void response.writeHead(204).end();
    requests.push(path);
    try {
      const contents = await readFile(fileOf(path));
      const policy = policies[path];
      response.writeHead(200, {
        "Content-Type": mediaTypes[extname(path)] ?? "application/octet-stream",
        ...(policy === undefined ? {} : { "Content-Security-Policy": policy }),
        // A worker of an isolated page needs the second of them too.
        ...(path === "/threads-isolated.html" ? isolation : path.endsWith(".js") ? { "Cross-Origin-Embedder-Policy": "require-corp" } : {}),
      });
      response.end(contents);
    } catch {
      response.writeHead(404).end();
    }
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const { port } = server.address() as AddressInfo;
  return { address: `http://127.0.0.1:${port}`, requests, stop: () => new Promise((resolve) => server.close(() => resolve())) };
}
