/** Bundles the command line with its libraries and src/report into dist/cli/tapwise.js; the package itself stays outside the bundle. */
import { chmodSync, existsSync, mkdirSync, writeFileSync } from "node:fs";
import { dirname, join, relative, resolve, sep } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "esbuild";
import { bundledLicences } from "./licences.mjs";

const root = join(dirname(fileURLToPath(import.meta.url)), "..");
const source = join(root, "src");
const entry = join(source, "cli", "tapwise.ts");

/** Public faces of the library, which become imports of files of dist/. */
const faces = { [join(source, "index.js")]: "../index.js", [join(source, "measure", "index.js")]: "../measure.js" };

/** What is bundled: the command line, and what it shares with pages that show results. */
const bundled = [join(source, "cli"), join(source, "report")];

/** From what is bundled into the library leads no way but its public faces. */
const publicFacesOnly = {
  name: "public-faces-only",
  setup(bundle) {
    bundle.onResolve({ filter: /^\.\.?\// }, ({ path, resolveDir, importer }) => {
      const isInside = (file) => bundled.some((folder) => file.startsWith(folder + sep));
      const target = resolve(resolveDir, path);
      if (!isInside(importer) || isInside(target)) return undefined;
      if (faces[target] !== undefined) return { path: faces[target], external: true };
      return { errors: [{ text: `${relative(root, importer)} may use the library through its public faces only, not ${path}` }] };
    });
  },
};

/** `dist/cli/tapwise.js`, and beside it what only `measure` needs, so that the other commands need not wait for it. */
export async function buildCommandLine() {
  if (!existsSync(entry)) throw new Error("src/cli/tapwise.ts, the entry of the command line, is missing.");
  const folder = join(root, "dist", "cli");
  const { outputFiles, metafile } = await build({
    absWorkingDir: root,
    entryPoints: [entry],
    outdir: folder,
    chunkNames: "[name]-[hash]",
    bundle: true,
    splitting: true,
    minify: true,
    write: false,
    metafile: true,
    platform: "node",
    format: "esm",
    target: "node20.16",
    legalComments: "none",
    logLevel: "warning",
    plugins: [publicFacesOnly],
    banner: { js: 'import { createRequire as requireFrom } from "node:module";\nconst require = requireFrom(import.meta.url);' },
  });
  mkdirSync(folder, { recursive: true });
  for (const { path, contents } of outputFiles) writeFileSync(path, contents);
  chmodSync(join(folder, "tapwise.js"), 0o755);
  writeFileSync(join(folder, "LICENCES.txt"), bundledLicences(Object.keys(metafile.inputs), root));
}
