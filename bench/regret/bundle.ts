import { fileURLToPath } from "node:url";
import { build } from "esbuild";

/** From the top of the repository. */
export const bundlePath = "bench/out/regret/inside.js";

/** Bundles what runs inside Node or a page, minified as dist/ is: planning is timed as users have it. */
export async function makeBundle(): Promise<void> {
  await build({
    absWorkingDir: fileURLToPath(new URL("../../", import.meta.url)),
    entryPoints: ["bench/regret/inside.ts"],
    outfile: bundlePath,
    bundle: true,
    format: "esm",
    target: "es2022",
    minify: true,
    logLevel: "warning",
  });
}
