import type { Crossover } from "../../../src/measure/index.js";
import { crossoverChart } from "../../../src/report/chart.js";

/** The chart's own limits. */
const [narrowest, widest] = [320, 1600];

/** Draws results anew, with earlier ones behind them. */
export function drawChart(into: HTMLElement, crossover: Crossover, earlier: Crossover | undefined): void {
  const width = Math.min(widest, Math.max(narrowest, Math.floor(into.clientWidth)));
  into.replaceChildren(crossoverChart(crossover, { document, width, ...(earlier === undefined ? {} : { earlier }) }));
}
