import { readFileSync, readdirSync } from "node:fs";
import { join } from "node:path";

/** The package folder ("node_modules/name" or "node_modules/@scope/name") that a bundled file came from, if it came from one. */
function packageFolder(input) {
  return /^.*node_modules\/(?:@[^/]+\/)?[^/]+/.exec(input)?.[0];
}

/** The licence texts of every package of which a bundle holds code, from the bundler's list of input files. */
export function bundledLicences(inputs, root) {
  const folders = [...new Set(inputs.map(packageFolder).filter((folder) => folder !== undefined))].sort();
  const texts = folders.map((folder) => {
    const path = join(root, folder);
    const { name, version, license } = JSON.parse(readFileSync(join(path, "package.json"), "utf8"));
    const file = readdirSync(path).find((candidate) => /^licen[cs]e/i.test(candidate));
    if (file === undefined) throw new Error(`${name} ${version} (${license}) is bundled but has no licence file to ship.`);
    return `${name} ${version} (${license})\n\n${readFileSync(join(path, file), "utf8").trim()}\n`;
  });
  return `The command line contains code of these packages.\n\n${texts.join(`\n${"-".repeat(80)}\n\n`)}`;
}
