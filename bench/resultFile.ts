import { mkdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import type { Host } from "./host.js";

const folder = fileURLToPath(new URL("results/", import.meta.url));

const plain = (text: string): string =>
  text
    .toLowerCase()
    .replaceAll(/[^a-z0-9.]+/g, "-")
    .replaceAll(/^-|-$/g, "");

/** Writes bench/results/<what>-<processor>-<runtime>.json and says where. */
export function writeResult(what: string, host: Host, content: Record<string, unknown>): void {
  mkdirSync(folder, { recursive: true });
  const name = `${what}-${plain(host.processor)}-node-${plain(host.versions["node"] ?? "")}.json`;
  writeFileSync(join(folder, name), `${JSON.stringify({ what, host, ...content }, null, 2)}\n`);
  console.log(`\nwritten: bench/results/${name}`);
}
