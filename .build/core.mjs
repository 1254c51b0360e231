/**
 * Compiles the core: every target of asconfig.json becomes src/generated/<target>.ts with the binary as hexadecimal text, and the
 * layout of the records that host and core share is copied to src/generated/record.ts. Does nothing while no source changed.
 */
import { mkdirSync, readFileSync, renameSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { fingerprintOf } from "./fingerprint.mjs";
import { dataSection, sectionIds, withoutCustomSections } from "./sections.mjs";

const root = join(dirname(fileURLToPath(import.meta.url)), "..");
const generated = join(root, "src", "generated");
const targets = Object.keys(JSON.parse(readFileSync(join(root, "asconfig.json"), "utf8")).targets);
/** Targets that are shipped: nothing in them but code. The others keep the names of their functions for stack traces. */
const shipped = new Set(targets.filter((target) => target !== "debug"));
/** Entries that a target has besides those of asconfig.json. */
const furtherEntries = { debug: ["assembly/testing.ts"] };

function fingerprint() {
  return fingerprintOf(root, ["assembly"], ["asconfig.json", ".build/core.mjs", ".build/sections.mjs", "node_modules/assemblyscript/package.json"]);
}

function isFresh(stamp) {
  return [...targets, "record"].every((name) => {
    try {
      return readFileSync(join(generated, `${name}.ts`), "utf8").startsWith(stamp);
    } catch {
      return false;
    }
  });
}

/** Written beside its place and renamed, so that a reader at the same time sees the old file or the new one. */
function writeWhole(name, text) {
  const path = join(generated, name);
  const unfinished = `${path}.${process.pid}`;
  writeFileSync(unfinished, text);
  renameSync(unfinished, path);
}

async function compile(asc, target) {
  let binary;
  const { error, stdout, stderr } = await asc.main(
    [...(furtherEntries[target] ?? []), "--config", "asconfig.json", "--target", target, "--baseDir", root, "--outFile", `${target}.wasm`],
    {
      writeFile: (name, contents) => {
        if (name.endsWith(".wasm")) binary = contents;
      },
    },
  );
  // The compiler optimises until the binary stops shrinking, and remarks that the last round made it larger: no fault of the sources.
  const messages = `${stdout}${stderr}`.replaceAll("Last converge was suboptimal.", "").trim();
  if (messages !== "") process.stderr.write(`${messages}\n`);
  if (error !== null || binary === undefined) throw new Error(`The core does not compile for the target ${target}.`, { cause: error });
  return shipped.has(target) ? withoutCustomSections(binary) : binary;
}

/**
 * The host owns every byte: a core that imports more than its memory, or brings a memory of its own, is refused; so is one with data
 * segments, which every thread that links the core with a shared memory would write anew over what the others use.
 */
function checkImports(target, binary) {
  if (shipped.has(target) && sectionIds(binary).includes(dataSection))
    throw new Error(`The target ${target} has data segments, which threads with one memory cannot have.`);
  // A host without fused multiply–add cannot read that target; it comes from the same sources as the others.
  if (target === "relaxedSimd" && !WebAssembly.validate(binary)) return;
  const module = new WebAssembly.Module(binary);
  const imports = WebAssembly.Module.imports(module).map(({ module: from, name, kind }) => `${from}.${name} (${kind})`);
  if (imports.join() !== "env.memory (memory)")
    throw new Error(`The core may import env.memory only; the target ${target} imports: ${imports.join(", ") || "nothing"}.`);
}

export async function buildCore() {
  const stamp = `// from sources ${fingerprint()}\n`;
  if (isFresh(stamp)) return;
  mkdirSync(generated, { recursive: true });
  const { default: asc } = await import("assemblyscript/asc");
  const byteLengths = [];
  for (const target of targets) {
    const binary = await compile(asc, target);
    checkImports(target, binary);
    writeWhole(`${target}.ts`, `${stamp}export const code: string = "${Buffer.from(binary).toString("hex")}";\n`);
    byteLengths.push(`${target} ${binary.length}`);
  }
  writeWhole("record.ts", stamp + readFileSync(join(root, "assembly", "record.ts"), "utf8"));
  console.log(`core: ${byteLengths.join(", ")} bytes`);
}

if (process.argv[1] === fileURLToPath(import.meta.url)) await buildCore();
