import { readFile } from "node:fs/promises";
import { createHash } from "node:crypto";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "esbuild";
import { chartStyle } from "../../src/report/chart/colours.js";

const root = fileURLToPath(new URL("../../", import.meta.url));
const client = "bench/page/client";

/** What the page runs: itself, the worker that measures, and the engine's own worker for further threads. */
const scripts = { page: `${client}/page.ts`, measurer: `${client}/measurer.ts`, thread: "src/runtime/workers/worker.ts" };

/** What would end the element of a script early, or change how what follows it is read. */
const endsScript = /<\/script|<!--/i;

/** One file with all that a script imports, loaded or not: nothing is left to be fetched later. */
async function bundled(entry: string): Promise<string> {
  const { outputFiles } = await build({
    absWorkingDir: root,
    entryPoints: [entry],
    bundle: true,
    write: false,
    format: "esm",
    target: "es2022",
    platform: "browser",
    minify: true,
    legalComments: "none",
    logLevel: "warning",
  });
  const text = outputFiles[0]!.text;
  if (endsScript.test(text)) throw new Error(`${entry} holds text that would end its element in the page.`);
  return text;
}

const sourceOf = (name: string): Promise<string> => readFile(join(root, client, name), "utf8");

const printOf = (script: string): string => `'sha256-${createHash("sha256").update(script).digest("base64")}'`;

/**
 * What the page may do: run its own script, make workers of the texts that it holds, compile WebAssembly there. It may reach no other
 * address, its own server included, so what is measured stays on the device and the page needs no network once it is there.
 */
function policyFor(script: string): string {
  const allowed = ["default-src 'none'", `script-src ${printOf(script)} blob: 'wasm-unsafe-eval'`, "worker-src blob:"];
  return [...allowed, "style-src 'unsafe-inline'", "img-src data:", "base-uri 'none'", "form-action 'none'"].join("; ");
}

/** The page as one HTML text that loads nothing else. */
export async function buildPage(): Promise<string> {
  const [page, measurer, thread] = await Promise.all([scripts.page, scripts.measurer, scripts.thread].map(bundled));
  const [markup, style] = await Promise.all(["page.html", "page.css"].map(sourceOf));
  const parts: Record<string, string> = {
    "{{policy}}": policyFor(page),
    "<!-- style -->": `<style>${style}${chartStyle}</style>`,
    "<!-- scripts -->": [
      `<script type="text/plain" id="measurer">${measurer}</script>`,
      `<script type="text/plain" id="thread">${thread}</script>`,
      `<script type="module">${page}</script>`,
    ].join("\n"),
  };
  return markup.replaceAll(/\{\{policy\}\}|<!-- (?:style|scripts) -->/g, (place) => parts[place]!);
}
