import type { Import, Source } from "./sources.js";

/** The layer that a file of src/ belongs to: its folder, or its own name where it lies at the top. */
export function layerOf(path: string): string {
  const [, first = "", second] = path.split("/");
  return second === undefined ? first.replace(/\.ts$/, "") : first;
}

/**
 * What each layer may import besides itself. Read downwards it is the one way in which imports go:
 *
 *     index → api → planning → runtime → generated (the compiled routines);  math and kernels below, types and errors are leaves
 *
 * The planning knows of the generated files the layout of the records, the api the binaries that it loads.
 */
const mayImport: Record<string, readonly string[]> = {
  index: ["api", "planning", "kernels", "types", "errors"],
  api: ["planning", "runtime", "generated", "kernels", "math", "types", "errors"],
  planning: ["runtime", "generated", "kernels", "math", "types", "errors"],
  runtime: ["generated", "math", "types", "errors"],
  kernels: ["math", "types", "errors"],
  math: [],
  generated: [],
  errors: [],
  types: [],
  measure: ["index", "api", "planning", "runtime", "kernels", "math", "types", "errors"],
  report: ["index", "measure"],
  probe: ["index"],
  cli: ["index", "measure", "report"],
};

/** Leaves name the types of what is built on them, and types only. */
const mayNameTypesOf: Record<string, readonly string[]> = { types: ["kernels"] };

function isAllowed({ from, to, typeOnly }: Import): boolean {
  const layer = layerOf(from);
  const target = layerOf(to);
  if (target === layer && layer !== "index") return true;
  return (mayImport[layer] ?? []).includes(target) || (typeOnly && (mayNameTypesOf[layer] ?? []).includes(target));
}

/** Imports of src/ that go the wrong way, or to a package where the library has none. */
export function wrongImports(imports: readonly Import[]): string[] {
  return imports
    .filter((one) => one.from.startsWith("src/"))
    .filter((one) => (one.to.startsWith("src/") ? !isAllowed(one) : !["cli", "report"].includes(layerOf(one.from))))
    .map(({ from, to }) => `${from} imports ${to}`);
}

/** Behind the public face: what may change without a word to users. */
const inside = ["api", "planning", "runtime", "math", "generated"];

/**
 * Imports of the inside from where users are stood for: the demo, the yardsticks, and the tests of what is computed.
 * The fit and the tests of a part look inside on purpose.
 */
export function importsOfTheInside(imports: readonly Import[]): string[] {
  const outside =
    /^(bench\/(demo|pictures|yardsticks)\/|bench\/(bench|floor|yardsticks|cases|contender|verify)\.ts|test\/(laws|published|reference|support)\/)/;
  return imports
    .filter(({ from, to }) => outside.test(from) && to.startsWith("src/") && inside.includes(layerOf(to)))
    .map(({ from, to }) => `${from} imports ${to}`);
}

/** Layers without a rule: a new folder in src/ must say what it may import. */
export function unknownLayers(sources: readonly Source[]): string[] {
  return [...new Set(sources.map(({ path }) => layerOf(path)).filter((layer) => mayImport[layer] === undefined))];
}

/** One cycle of value imports as "a → b → a", or undefined. Types only vanish when compiled and make no cycle. */
export function firstCycle(imports: readonly Import[]): string | undefined {
  const targets = new Map<string, string[]>();
  for (const { from, to, typeOnly } of imports) if (!typeOnly) targets.set(from, [...(targets.get(from) ?? []), to]);
  const done = new Set<string>();
  const walk = (path: string, trail: readonly string[]): string | undefined => {
    if (trail.includes(path)) return [...trail.slice(trail.indexOf(path)), path].join(" → ");
    if (done.has(path)) return undefined;
    for (const next of targets.get(path) ?? []) {
      const cycle = walk(next, [...trail, path]);
      if (cycle !== undefined) return cycle;
    }
    done.add(path);
    return undefined;
  };
  for (const path of targets.keys()) {
    const cycle = walk(path, []);
    if (cycle !== undefined) return cycle;
  }
  return undefined;
}
