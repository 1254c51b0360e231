/** What a page that imports the package loads, and which part of the library takes how much of it. */
import { readFileSync, statSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { gzipSync } from "node:zlib";
import { filesOfLibrary } from "./library.mjs";

const root = join(dirname(fileURLToPath(import.meta.url)), "..");

/** The budget of a default page: JavaScript and the SIMD core. */
export const mostGzipBytes = 60_000;

/** Parts by the beginning of their modules' paths; the first that fits counts. */
const parts = {
  "the SIMD core as text": "src/generated/simd.ts",
  "kernels and their builders": "src/kernels/",
  "checks of what callers give": "src/api/validate/",
  "engine, filter, loading": "src/api/",
  "planning and prices": "src/planning/",
  "runtime": "src/runtime/",
  "mathematics": "src/math/",
  "the rest": "src/",
};

const gzipBytesOf = (contents) => gzipSync(contents, { level: 9 }).length;

/** Files of dist/ that come with the entry: those reached by static imports. */
function loadedWith(entry, files) {
  const reached = new Set([entry]);
  for (const path of reached) {
    for (const { path: next, kind, external } of files[path].imports) if (kind === "import-statement" && !external) reached.add(next);
  }
  return [...reached];
}

/** Bytes of every part over all files of a page. */
function bytesByPart(paths, files) {
  const bytes = Object.fromEntries(Object.keys(parts).map((name) => [name, 0]));
  for (const [module, { bytesInOutput }] of paths.flatMap((path) => Object.entries(files[path].inputs))) {
    bytes[Object.keys(parts).find((name) => module.startsWith(parts[name]))] += bytesInOutput;
  }
  return bytes;
}

/** What a default page loads: files as they are served, each compressed by itself. */
export function defaultPage() {
  const files = filesOfLibrary();
  const paths = loadedWith("dist/index.js", files);
  const contents = paths.map((path) => readFileSync(join(root, path)));
  return {
    paths,
    bytes: contents.reduce((sum, { length }) => sum + length, 0),
    gzipBytes: contents.reduce((sum, content) => sum + gzipBytesOf(content), 0),
    parts: bytesByPart(paths, files),
  };
}

export function checkPageSize() {
  const { gzipBytes } = defaultPage();
  if (gzipBytes > mostGzipBytes) throw new Error(`A default page loads ${gzipBytes} bytes with gzip, ${gzipBytes - mostGzipBytes} too many.\n\n${pageTable()}`);
}

const kilobytes = (byteLength) => `${(byteLength / 1000).toFixed(1)} kB`;
const row = (name, bytes, gzipBytes) => `  ${name.padEnd(30)}${kilobytes(bytes).padStart(9)}${kilobytes(gzipBytes).padStart(9)}`;

/**
 * The page by parts. The core is compressed by itself to learn its share, and what is left of the compressed page is given to the other
 * parts by their bytes.
 */
function pageTable() {
  const { paths, bytes, gzipBytes, parts: byPart } = defaultPage();
  const [core] = Object.keys(parts);
  const coreGzipBytes = gzipBytesOf(readFileSync(join(root, parts[core])));
  const share = (name) => (name === core ? coreGzipBytes : (byPart[name] / (bytes - byPart[core])) * (gzipBytes - coreGzipBytes));
  return [
    `${"A default page loads".padEnd(32)}minified     gzip`,
    ...Object.keys(parts).map((name) => row(name, byPart[name], share(name))),
    row(`all, in ${paths.length} ${paths.length === 1 ? "file" : "files"}`, bytes, gzipBytes),
  ].join("\n");
}

/** The page by parts, what comes only when it is asked for, and the tarball. */
export function sizeTable(tarball) {
  const { paths } = defaultPage();
  const others = Object.entries(filesOfLibrary()).filter(([path, { entryPoint }]) => entryPoint !== undefined && !paths.includes(path));
  return [
    pageTable(),
    "Loaded when needed",
    ...others.map(([path, { bytes }]) => row(path.replace("dist/", ""), bytes, gzipBytesOf(readFileSync(join(root, path))))),
    `Tarball ${kilobytes(statSync(tarball).size)}`,
  ].join("\n");
}
