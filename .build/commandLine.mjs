/** Bundles the command line with its two libraries into dist/cli/tapwise.js; the package itself stays outside the bundle. */
import { chmodSync, existsSync, mkdirSync, writeFileSync } from "node:fs";
import { dirname, join, relative, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "esbuild";
import { bundledLicences } from "./licences.mjs";

const root = join(dirname(fileURLToPath(import.meta.url)), "..");
const source = join(root, "src");
const entry = join(source, "cli", "tapwise.ts");

/** `src/index.ts` becomes an import of dist/index.js; any other way from src/cli into the library is an error. */
const publicFaceOnly = {
  name: "public-face-only",
  setup(bundle) {
    bundle.onResolve({ filter: /^\.\.?\// }, ({ path, resolveDir, importer }) => {
      const target = resolve(resolveDir, path);
      if (!importer.startsWith(join(source, "cli")) || target.startsWith(join(source, "cli"))) return undefined;
      if (target === join(source, "index.js")) return { path: "../index.js", external: true };
      return { errors: [{ text: `${relative(root, importer)} may use the library through src/index.ts only, not ${path}` }] };
    });
  },
};

export async function buildCommandLine() {
  if (!existsSync(entry)) throw new Error("src/cli/tapwise.ts, the entry of the command line, is missing.");
  const { outputFiles, metafile } = await build({
    absWorkingDir: root,
    entryPoints: [entry],
    outfile: join(root, "dist", "cli", "tapwise.js"),
    bundle: true,
    write: false,
    metafile: true,
    platform: "node",
    format: "esm",
    target: "node20.16",
    legalComments: "none",
    logLevel: "warning",
    plugins: [publicFaceOnly],
    banner: { js: 'import { createRequire as requireFrom } from "node:module";\nconst require = requireFrom(import.meta.url);' },
  });
  const text = outputFiles[0].text;
  const output = join(root, "dist", "cli", "tapwise.js");
  mkdirSync(dirname(output), { recursive: true });
  writeFileSync(output, text.startsWith("#!") ? text : `#!/usr/bin/env node\n${text}`);
  chmodSync(output, 0o755);
  writeFileSync(join(root, "dist", "cli", "LICENCES.txt"), bundledLicences(Object.keys(metafile.inputs), root));
}
