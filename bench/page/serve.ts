import { createServer } from "node:http";
import type { AddressInfo } from "node:net";

/**
 * Isolated, so that the clock is finer and threads may share memory; browsers heed that only at a secure address, which localhost is.
 * Nothing is kept, so that a page that is loaded again is the one that is served.
 */
const headers = {
  "Content-Type": "text/html; charset=utf-8",
  "Cross-Origin-Opener-Policy": "same-origin",
  "Cross-Origin-Embedder-Policy": "require-corp",
  "Cache-Control": "no-store",
  "X-Content-Type-Options": "nosniff",
  "Referrer-Policy": "no-referrer",
};

/** Why the page cannot be served, in words for the person at the keyboard. */
export class ServingError extends Error {
  override readonly name = "ServingError";
}

function reasonFor(error: NodeJS.ErrnoException, port: number): string {
  if (error.code === "EADDRINUSE") return `Port ${port} is taken by another program. Name a free one with --port, or 0 for any.`;
  if (error.code === "EACCES") return `Port ${port} may not be used by you. Take one above 1023 with --port.`;
  return `The page cannot be served on port ${port}: ${error.message}.`;
}

/**
 * Serves one page at every address of this machine, or on this machine alone.
 *
 * @param page HTML
 * @param port 0 for any that is free
 * @param everywhere also for other devices of the network
 * @throws ServingError where the port is taken or may not be used
 */
export async function servePage(page: string, port: number, everywhere: boolean): Promise<{ port: number; stop(): Promise<void> }> {
  const server = createServer(({ url, method }, response) => {
    const found = new URL(url ?? "/", "http://localhost").pathname === "/";
    if (!found) return void response.writeHead(404, { "Content-Type": "text/plain; charset=utf-8" }).end("The page is at /.\n");
    response.writeHead(200, headers).end(method === "HEAD" ? undefined : page);
  });
  await new Promise<void>((resolve, reject) => {
    server.once("error", (error) => reject(new ServingError(reasonFor(error, port), { cause: error })));
    server.listen(port, everywhere ? "0.0.0.0" : "127.0.0.1", resolve);
  });
  const stop = (): Promise<void> =>
    new Promise((resolve) => {
      server.close(() => resolve());
      server.closeAllConnections();
    });
  return { port: (server.address() as AddressInfo).port, stop };
}
