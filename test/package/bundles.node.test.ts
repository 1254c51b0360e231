import { mkdirSync, readFileSync, readdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { build as buildByEsbuild } from "esbuild";
import { build as buildByVite } from "vite";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { installTarball, type Installation } from "./installed.js";

let installation: Installation;
beforeAll(() => {
  installation = installTarball();
  writeFileSync(join(installation.folder, "page.js"), page);
});
afterAll(() => installation.remove());

/** A page that needs one builder of all. */
const page = `
import { createEngine, gaussian } from "tapwise";
const engine = await createEngine();
document.title = String(engine.convolve({ data: new Float32Array(64), width: 8, height: 8 }, gaussian(1)).data[0]);
`;

const bundlers: Record<string, (entry: string, folder: string) => Promise<unknown>> = {
  esbuild: (entry, outdir) => buildByEsbuild({ entryPoints: [entry], outdir, bundle: true, minify: true, splitting: true, format: "esm", logLevel: "silent" }),
  vite: (input, outDir) =>
    buildByVite({ root: installation.folder, configFile: false, logLevel: "silent", build: { target: "es2022", outDir, rollupOptions: { input } } }),
};

/** Every script that a bundler wrote, by its path. */
function scriptsIn(folder: string): Record<string, string> {
  const paths = readdirSync(folder, { recursive: true, encoding: "utf8" }).filter((path) => path.endsWith(".js"));
  return Object.fromEntries(paths.map((path) => [path, readFileSync(join(folder, path), "utf8")]));
}

describe.each(Object.keys(bundlers))("a page bundled by %s", (name) => {
  let scripts: Record<string, string>;
  beforeAll(async () => {
    const folder = join(installation.folder, `by-${name}`);
    mkdirSync(folder, { recursive: true });
    await bundlers[name]!(join(installation.folder, "page.js"), folder);
    scripts = scriptsIn(folder);
  });

  test("leaves out the builders that it does not use", () => {
    const all = Object.values(scripts).join("\n");
    expect(all).toMatch(/gaussian/);
    // A word of each builder's own options or messages: the Laplacian's stencils, a line's angle, the names that messages begin with.
    for (const word of ["mehrstellen", "differenceOfGaussians", "kernelFromRaster", "angleInDegrees"]) expect(all, word).not.toContain(word);
  });

  test("keeps cores that are loaded when needed in files of their own", () => {
    const paths = Object.keys(scripts);
    expect(paths.filter((path) => /core-scalar/.test(path))).toHaveLength(1);
    const core = scripts[paths.find((path) => /core-scalar/.test(path))!]!;
    const [code] = /[0-9a-f]{2000,}/.exec(core)!;
    for (const path of paths.filter((one) => !/core-/.test(one))) expect(scripts[path]!.includes(code), path).toBe(false);
  });
});
