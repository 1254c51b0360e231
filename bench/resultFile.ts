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

const widest = 240;

/** JSON with a line for each record: what fits into a line stays on it. */
function laidOut(value: unknown, indent = ""): string {
  const line = JSON.stringify(value);
  if (typeof value !== "object" || value === null || line.length + indent.length <= widest) return line;
  const deeper = `${indent}  `;
  const parts = Array.isArray(value)
    ? value.map((one) => laidOut(one, deeper))
    : Object.entries(value).map(([name, one]) => `${JSON.stringify(name)}: ${laidOut(one, deeper)}`);
  const [open, close] = Array.isArray(value) ? ["[", "]"] : ["{", "}"];
  return `${open}\n${deeper}${parts.join(`,\n${deeper}`)}\n${indent}${close}`;
}

/** Writes bench/results/<what>-<processor>-<runtime>.json and says where. */
export function writeResult(what: string, host: Host, content: Record<string, unknown>): void {
  mkdirSync(folder, { recursive: true });
  const name = `${what}-${plain(host.processor)}-node-${plain(host.versions["node"] ?? "")}.json`;
  writeFileSync(join(folder, name), `${laidOut({ what, host, ...content })}\n`);
  console.log(`\nwritten: bench/results/${name}`);
}
