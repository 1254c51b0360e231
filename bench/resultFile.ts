import { existsSync, mkdirSync, readFileSync, writeFileSync } from "node:fs";
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

/** node-20.20.2: what this process runs on. */
const runtimeOf = ({ versions }: Host): string => `node-${versions["node"] ?? ""}`;

const nameOf = (what: string, host: Host, runtime: string): string => `${what}-${plain(host.processor)}-${plain(runtime)}.json`;

/**
 * Writes bench/results/<what>-<processor>-<runtime>.json.
 *
 * @param runtime where the measured code ran, with its version
 * @returns the file's path in the repository
 */
export function saveResult(what: string, host: Host, content: Record<string, unknown>, runtime = runtimeOf(host)): string {
  mkdirSync(folder, { recursive: true });
  const name = nameOf(what, host, runtime);
  writeFileSync(join(folder, name), `${laidOut({ what, host, ...content })}\n`);
  return `bench/results/${name}`;
}

/** The same, and says where. */
export function writeResult(what: string, host: Host, content: Record<string, unknown>, runtime = runtimeOf(host)): void {
  console.log(`\nwritten: ${saveResult(what, host, content, runtime)}`);
}

/** What the file holds, where there is one. */
export function readResult(what: string, host: Host, runtime = runtimeOf(host)): Record<string, unknown> | undefined {
  const path = join(folder, nameOf(what, host, runtime));
  return existsSync(path) ? (JSON.parse(readFileSync(path, "utf8")) as Record<string, unknown>) : undefined;
}

/**
 * The same where parts are measured in runs of their own: parts that were not measured now stay as they are in the file.
 *
 * @param under the property that holds the parts by name; each says itself when and with what it was measured
 */
export function mergeResult(what: string, host: Host, under: string, parts: Record<string, unknown>): void {
  const known = readResult(what, host)?.[under] ?? {};
  writeResult(what, host, { [under]: { ...(known as Record<string, unknown>), ...parts } });
}
