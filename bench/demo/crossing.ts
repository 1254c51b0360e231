import type { Engine, Layout } from "../../src/index.js";
import type { Family } from "./jobs.js";

/** Where the engine's choice changes along a family of kernels, in a sentence; only asked, nothing is run. */
export function crossingSentence(engine: Engine, family: Family, layout: Required<Layout>): string {
  const steps = family.values.map((value) => {
    const kernel = family.kernelOf(value);
    return { value, taps: kernel.width, method: engine.explain(kernel, layout).method };
  });
  const changes = steps.filter((step, index) => index === 0 || step.method !== steps[index - 1].method);
  const parts = changes.map(({ value, taps, method }) => `${method} from ${family.symbol} = ${value} (${taps}×${taps} taps)`);
  const widest = steps[steps.length - 1];
  return `For other widths of this ${family.name} the engine would choose ${parts.join(", ")}, up to the widest asked for, ${family.symbol} = ${widest.value}.`;
}
