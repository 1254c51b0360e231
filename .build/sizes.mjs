import { readFileSync, readdirSync, statSync } from "node:fs";
import { dirname, join, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import { gzipSync } from "node:zlib";

const root = join(dirname(fileURLToPath(import.meta.url)), "..");

/** Files of dist/ that a page loads when it imports the package: those reached from the entry by static imports. */
export function loadedFromEntry(entry = join(root, "dist", "index.js")) {
  const reached = new Set();
  const waiting = [entry];
  for (let path = waiting.pop(); path !== undefined; path = waiting.pop()) {
    if (reached.has(path)) continue;
    reached.add(path);
    const text = readFileSync(path, "utf8");
    for (const [, specifier] of text.matchAll(/^(?:import|export)\b[^;"]*?"(\.{1,2}\/[^"]+)"/gm)) waiting.push(resolve(dirname(path), specifier));
  }
  return [...reached];
}

function kilobytes(byteLength) {
  return `${(byteLength / 1000).toFixed(1)} kB`;
}

/** Bytes of the tarball and of what a default page loads, in words. */
export function packageSizes(tarball) {
  const files = loadedFromEntry();
  const bytes = Buffer.concat(files.map((path) => readFileSync(path)));
  const shipped = readdirSync(join(root, "dist"), { recursive: true }).filter((name) => name.endsWith(".js")).length;
  return (
    `tarball ${kilobytes(statSync(tarball).size)}; ` +
    `a default page loads ${files.length} of ${shipped} modules, ${kilobytes(bytes.length)}, ${kilobytes(gzipSync(bytes, { level: 9 }).length)} with gzip`
  );
}
