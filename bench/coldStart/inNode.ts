import { execFileSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import type { ColdStart, SampleOfStart } from "./coldStart.js";

const script = fileURLToPath(new URL("inProcess.js", import.meta.url));
const built = new URL("../../dist/index.js", import.meta.url).href;

/** One cold start in a Node process of its own. */
export function startInNode(sample: SampleOfStart): ColdStart {
  return JSON.parse(execFileSync(process.execPath, [script, built, sample], { encoding: "utf8" })) as ColdStart;
}
